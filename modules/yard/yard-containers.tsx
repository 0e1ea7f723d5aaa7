import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import type { Container } from '@/shared/contracts/containers'
import type { Site } from '@/shared/contracts/set-up'
import { absolute, compare, divide, isPositive } from '@/shared/quantities/decimals'
import { formatLitresAs } from '@/shared/quantities/format'
import { useSession } from '../session/use-session'
import { Card } from '../ui/card'
import { Heading } from '../ui/heading'
import { LevelPicture } from '../ui/level-picture'
import { LinkBlock, LinkText } from '../ui/link-text'
import { EmptyState } from '../ui/loading'
import { gap, target } from '../ui/measures'
import { Status } from '../ui/status'
import { Text } from '../ui/text'
import { useColours } from '../ui/theme'
import { useWindowClass } from '../ui/use-window-class'

type Props = { site: Site; containers: readonly Container[] }

const shownAtMost = 8

/** Containers for fluid, fullest against their line first. */
export function YardContainers({ site, containers }: Props) {
  const { t } = useTranslation()
  const { can } = useSession()
  const fluid = containers.filter(({ stream }) => stream.kind === 'fluid')
  const sorted = [...fluid].sort((a, b) => compare(fullness(b), fullness(a)))
  return (
    <Card role="region" label={t('yard.containers.title')}>
      <Heading level={2}>{t('yard.containers.title')}</Heading>
      {fluid.length === 0 ? (
        <EmptyState
          title={t('yard.containers.empty', { site: site.name })}
          action={
            can('change-set-up') ? (
              <LinkText href="/setup">{t('yard.containers.add')}</LinkText>
            ) : undefined
          }
        />
      ) : (
        !fluid.some(({ level }) => level !== 'room') && <Text>{t('yard.containers.none')}</Text>
      )}
      <View>
        {sorted.slice(0, shownAtMost).map((container) => (
          <ContainerRow key={container.id} container={container} site={site} />
        ))}
      </View>
      <LinkText href="/containers">{t('yard.containers.all')}</LinkText>
    </Card>
  )
}

/** Share of the fill line that is filled, for sorting; a line of nothing counts as full. */
function fullness({ litres, fillLineLitres }: Container): string {
  return isPositive(fillLineLitres) ? divide(litres, fillLineLitres, 6) : '1'
}

function ContainerRow({ container, site }: { container: Container; site: Site }) {
  const { t } = useTranslation()
  const colours = useColours()
  const isPhone = useWindowClass() === 'phone'
  const shown = (litres: string) => formatLitresAs(litres, site.volumeUnit)
  const room = t(
    container.level === 'over'
      ? 'yard.containers.over'
      : container.level === 'below-zero'
        ? 'yard.containers.belowZero'
        : 'yard.containers.roomLeft',
    {
      volume:
        container.level === 'over'
          ? shown(absolute(container.roomLitres))
          : shown(container.level === 'below-zero' ? container.litres : container.roomLitres),
    },
  )
  const state =
    container.hold !== null
      ? ({ kind: 'stop', word: 'held' } as const)
      : (
          {
            room: { kind: 'settled', word: 'room' },
            near: { kind: 'check', word: 'near' },
            over: { kind: 'stop', word: 'over' },
            'below-zero': { kind: 'check', word: 'below-zero' },
          } as const
        )[container.level]
  const stateWords = t(`yard.levels.${state.word}`)
  const age =
    container.ageDays === null ? '' : t('yard.containers.age', { count: container.ageDays })
  const standing = (
    <View
      style={{
        flexDirection: isPhone ? 'row' : 'column',
        flexWrap: 'wrap',
        alignItems: isPhone ? 'center' : 'flex-end',
        gap: isPhone ? gap.small : gap.tiny,
      }}
    >
      <Text kind="figure">{room}</Text>
      <View>
        <Status kind={state.kind} label={stateWords} />
      </View>
    </View>
  )
  return (
    <LinkBlock
      href={`/containers/${container.code}`}
      label={[container.code, container.stream.name, room, stateWords, age]
        .filter(Boolean)
        .join(', ')}
    >
      <View
        style={{
          flexDirection: 'row',
          alignItems: 'center',
          gap: gap.gutter,
          minHeight: target.yard,
          paddingVertical: gap.small,
          borderTopWidth: 1,
          borderColor: colours.hairline,
        }}
      >
        <LevelPicture
          kind={container.type}
          capacity={Number(container.capacityLitres)}
          fillLine={Number(container.fillLineLitres)}
          contents={Number(container.litres)}
          label={`${container.code}: ${room}`}
          height={56}
        />
        <View style={{ flex: 1, minWidth: 0 }}>
          <Text kind="strong">{`${container.code} ${container.description}`.trim()}</Text>
          <Text kind="label">{[container.stream.name, age].filter(Boolean).join(' · ')}</Text>
          {isPhone && standing}
        </View>
        {!isPhone && standing}
      </View>
    </LinkBlock>
  )
}
