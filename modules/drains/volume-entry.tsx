import { useEffect, type Ref } from 'react'
import { Pressable, View } from 'react-native'
import { useTranslation } from 'react-i18next'
import type { Container } from '@/shared/contracts/containers'
import { formatLitresAs } from '@/shared/quantities/format'
import { unitSymbol, unitWordsKey, type VolumeUnit } from '@/shared/quantities/units'
import { useAnnounce } from '../ui/announcer'
import { fonts, gap, radius, target } from '../ui/measures'
import { Text } from '../ui/text'
import { useColours } from '../ui/theme'
import { DrainPicture } from './drain-picture'
import { readVolume } from './drain-legs'
import { roomAfter } from './room-after'

type Props = {
  typed: string
  unit: VolumeUnit
  onType: (typed: string) => void
  /** A unit typed behind the figure: it wins over the button. */
  onUnitTyped: (unit: VolumeUnit) => void
  onNextUnit: () => void
  onSubmit: () => void
  usesPhoneKeys: boolean
  errorId: string | undefined
  container: Container | undefined
  /** Exact litres that go into the container of the picture. */
  pouredLitres: string
  fieldRef: Ref<HTMLInputElement>
}

/** After a pause in typing this long, a screen reader hears the room once. */
const pauseMs = 1_000

/** The number, its unit, and the container as it would stand: 124 px high on a phone. */
export function VolumeEntry({
  typed,
  unit,
  onType,
  onUnitTyped,
  onNextUnit,
  onSubmit,
  usesPhoneKeys,
  errorId,
  container,
  pouredLitres,
  fieldRef,
}: Props) {
  const { t } = useTranslation()
  const colours = useColours()
  const announce = useAnnounce()
  const unitWords = t(unitWordsKey(unit), { count: 2 })
  const room = container === undefined ? undefined : roomAfter(container, pouredLitres)
  const roomWords =
    room === undefined
      ? t('drains.form.noContainer')
      : room.isOver
        ? t('drains.form.over', { volume: formatLitresAs(room.overLitres, unit) })
        : t('drains.form.room', { volume: formatLitresAs(room.roomLitres, unit) })

  useEffect(() => {
    if (typed === '') return
    const timer = setTimeout(() => announce(roomWords), pauseMs)
    return () => clearTimeout(timer)
  }, [typed, roomWords, announce])

  function type(next: string) {
    onType(next)
    const read = readVolume(next, unit)
    if (read.ok && read.unitWasTyped && read.unit !== unit) onUnitTyped(read.unit as VolumeUnit)
  }

  return (
    <View style={{ flexDirection: 'row', height: 124, gap: gap.small, alignItems: 'center' }}>
      <View style={{ flex: 1, minWidth: 0, gap: gap.tiny }}>
        <View style={{ flexDirection: 'row', gap: gap.small, alignItems: 'center' }}>
          <input
            ref={fieldRef}
            aria-label={t('drains.form.volumeIn', { unit: unitWords })}
            aria-invalid={errorId !== undefined}
            aria-describedby={errorId}
            inputMode={usesPhoneKeys ? 'decimal' : 'none'}
            autoComplete="off"
            value={typed}
            maxLength={14}
            onChange={(event) => type(event.target.value)}
            onKeyDown={(event) => {
              if (event.key === 'Enter') {
                event.preventDefault()
                onSubmit()
              }
            }}
            style={{
              flex: 1,
              minWidth: 0,
              width: '100%',
              height: 72,
              boxSizing: 'border-box',
              padding: '0 8px',
              fontFamily: fonts.heading,
              fontSize: typed.length > 6 ? 36 : 52,
              fontVariantNumeric: 'tabular-nums',
              textAlign: 'right',
              color: colours.ink,
              backgroundColor: colours.sheet,
              border: `${errorId === undefined ? 1 : 3}px solid ${errorId === undefined ? colours.edge : colours.stop.edge}`,
              borderRadius: radius,
            }}
          />
          <Pressable
            role="button"
            aria-label={t('drains.form.unit', { unit: unitWords })}
            onPress={onNextUnit}
            style={{
              width: target.primary,
              height: target.yard,
              alignItems: 'center',
              justifyContent: 'center',
              borderRadius: radius,
              borderWidth: 1,
              borderColor: colours.edge,
              backgroundColor: colours.actWash,
            }}
          >
            <Text kind="strong" numberOfLines={1}>
              {unitSymbol(unit)}
            </Text>
          </Pressable>
        </View>
        <View
          style={{
            alignSelf: 'flex-end',
            paddingHorizontal: gap.small,
            borderLeftWidth: room?.isOver ? 6 : 0,
            borderColor: colours.stop.edge,
            backgroundColor: room?.isOver ? colours.stop.bg : 'transparent',
          }}
        >
          <Text
            kind="strong"
            numberOfLines={1}
            colour={room?.isOver ? colours.stop.text : colours.ink}
            style={{ fontVariant: ['tabular-nums'] }}
          >
            {roomWords}
          </Text>
        </View>
      </View>
      {container !== undefined && (
        <DrainPicture container={container} pouredLitres={pouredLitres} unit={unit} height={104} />
      )}
    </View>
  )
}
