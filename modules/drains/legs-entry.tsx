import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import type { Container } from '@/shared/contracts/containers'
import { absolute, isNegative } from '@/shared/quantities/decimals'
import { formatLitresAs } from '@/shared/quantities/format'
import type { VolumeUnit } from '@/shared/quantities/units'
import { Button } from '../ui/button'
import { Stack } from '../ui/card'
import { Field } from '../ui/field'
import { Heading } from '../ui/heading'
import { gap } from '../ui/measures'
import { Text } from '../ui/text'
import { DrainPicture } from './drain-picture'
import type { LegShare } from './drain-legs'
import type { LegValues } from './drain-values'
import { PickRow } from './pick-row'
import { roomAfter } from './room-after'

type Props = {
  legs: readonly LegValues[]
  shares: readonly LegShare[]
  containers: readonly Container[]
  unit: VolumeUnit
  errorOf: (field: string) => string | undefined
  onType: (position: number, typed: string) => void
  onPick: (position: number) => void
  onAdd: () => void
  onRemove: (position: number) => void
}

/** A drain over several containers: typed parts, and the last that takes the exact rest, shown while typing. */
export function LegsEntry(props: Props) {
  const { legs, shares, containers, unit, errorOf } = props
  const { t } = useTranslation()
  const isSplit = legs.length > 1
  return (
    <Stack>
      {isSplit && <Heading level={2}>{t('drains.form.splitTitle')}</Heading>}
      {isSplit &&
        legs.map((leg, position) => {
          const container = containers.find(({ id }) => id === leg.containerId)
          const litres = shares[position]?.litres
          const error = errorOf(`legs.${position}.typed`) ?? errorOf(`legs.${position}.containerId`)
          return (
            <View
              key={position}
              role="group"
              aria-label={t('drains.form.leg', { position: position + 1 })}
              style={{ gap: gap.small }}
            >
              <PickRow
                label={t('drains.form.leg', { position: position + 1 })}
                value={container?.code}
                placeholder={t('drains.form.chooseContainer')}
                detail={container?.stream.name}
                icon="drum"
                hasError={errorOf(`legs.${position}.containerId`) !== undefined}
                onPress={() => props.onPick(position)}
              />
              <View style={{ flexDirection: 'row', gap: gap.gutter, alignItems: 'center' }}>
                <View style={{ flex: 1 }}>
                  {position < legs.length - 1 ? (
                    <Field
                      label={t('drains.form.legVolume', {
                        container:
                          container?.code ?? t('drains.form.leg', { position: position + 1 }),
                      })}
                      inputMode="decimal"
                      characters={9}
                      value={leg.typed}
                      error={error}
                      onChange={(typed) => props.onType(position, typed)}
                    />
                  ) : (
                    <>
                      <Text kind="strong" live="polite">
                        {restWords(litres)}
                      </Text>
                      {error !== undefined && (
                        <Text kind="strong" role="alert">
                          {error}
                        </Text>
                      )}
                    </>
                  )}
                  {container !== undefined && litres !== undefined && !isNegative(litres) && (
                    <Text kind="label">{roomWords(container, litres)}</Text>
                  )}
                </View>
                {container !== undefined && (
                  <DrainPicture
                    container={container}
                    pouredLitres={litres === undefined || isNegative(litres) ? '0' : litres}
                    unit={unit}
                    height={72}
                  />
                )}
              </View>
              {position > 0 && (
                <Button
                  kind="quiet"
                  icon="close"
                  label={t('drains.form.removeLeg', {
                    container: container?.code ?? t('drains.form.leg', { position: position + 1 }),
                  })}
                  onPress={() => props.onRemove(position)}
                />
              )}
            </View>
          )
        })}
      {legs.length < 8 && (
        <Button icon="plus" label={t('drains.form.addLeg')} onPress={props.onAdd} />
      )}
    </Stack>
  )

  function restWords(litres: string | undefined): string {
    if (litres === undefined) return t('drains.form.legRestUnknown')
    return isNegative(litres)
      ? t('drains.form.legOver', { volume: formatLitresAs(absolute(litres), unit) })
      : t('drains.form.legRest', { volume: formatLitresAs(litres, unit) })
  }

  function roomWords(container: Container, litres: string): string {
    const room = roomAfter(container, litres)
    return room.isOver
      ? t('drains.form.over', { volume: formatLitresAs(room.overLitres, unit) })
      : t('drains.form.room', { volume: formatLitresAs(room.roomLitres, unit) })
  }
}
