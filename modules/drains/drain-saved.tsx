import { useEffect, useState } from 'react'
import { useRouter } from 'expo-router'
import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import { strikeDrain } from '@/shared/contracts/drains'
import { formatLitresAs, formatTyped } from '@/shared/quantities/format'
import type { VolumeUnit } from '@/shared/quantities/units'
import { call } from '../api/call'
import { useShowProblem, type ShownProblem } from '../api/show-problem'
import { useRefreshWhatChanged, whatPouringChanges } from '../api/use-refresh-what-changed'
import { useQueue, useQueuedRecords } from '../offline/queue-provider'
import { isUnsent } from '../offline/queued-record'
import { Button } from '../ui/button'
import { Card } from '../ui/card'
import { Heading } from '../ui/heading'
import { LinkText } from '../ui/link-text'
import { gap } from '../ui/measures'
import { Notice } from '../ui/notice'
import { Text } from '../ui/text'
import { litresOf, readVolume, shareLegs } from './drain-legs'
import type { DrainValues } from './drain-values'
import { QueueStatus } from './queue-status'
import { roomAfter } from './room-after'
import type { DrainChoices } from './use-drain-choices'

type Props = {
  recordId: string
  values: DrainValues
  choices: DrainChoices
  unit: VolumeUnit
  onSameMachine: () => void
  onAnother: () => void
}

const undoMs = 10_000

/** What was saved and where it went, not a modal: undo for ten seconds and until sent, then the next act. */
export function DrainSaved({ recordId, values, choices, unit, onSameMachine, onAnother }: Props) {
  const { t } = useTranslation()
  const router = useRouter()
  const queue = useQueue()
  const record = useQueuedRecords().find(({ id }) => id === recordId)
  const refreshWhatChanged = useRefreshWhatChanged()
  const showProblem = useShowProblem('drains')
  const [problem, setProblem] = useState<ShownProblem>()
  const [isLate, setLate] = useState(false)
  const [undoing, setUndoing] = useState<'no' | 'now' | 'done'>('no')
  // As the containers stood when this was saved: once the list is fetched again, they hold it already.
  const [rooms] = useState(() => roomsAfter(values, choices))
  const [names] = useState(() => (record === undefined ? undefined : { ...record }))
  const read = readVolume(values.typed, values.unit)
  const volume = read.ok ? formatTyped(read.value, read.unit) : values.typed
  const machine = names?.machineName ?? ''
  const canUndo = undoing !== 'done' && (!isLate || (record !== undefined && isUnsent(record)))

  useEffect(() => {
    const timer = setTimeout(() => setLate(true), undoMs)
    return () => clearTimeout(timer)
  }, [])

  async function undo() {
    setUndoing('now')
    setProblem(undefined)
    try {
      const accepted = await queue.remove(recordId)
      if (accepted !== undefined) {
        await call(strikeDrain, {
          params: { id: recordId },
          body: { expectedRevision: 1, reason: t('drains.saved.undoReason') },
        })
        await queue.forget(recordId)
        await refreshWhatChanged(whatPouringChanges)
      }
      setUndoing('done')
    } catch (error) {
      setUndoing('no')
      setProblem(showProblem(error))
    }
  }

  return (
    <View
      role="main"
      id="main"
      style={{ flex: 1, width: '100%', maxWidth: 680, padding: gap.gutter, gap: gap.medium }}
    >
      <Card>
        <Heading level={1} takesFocus key={undoing}>
          {undoing === 'done'
            ? t('drains.saved.undone', { volume, machine })
            : t('drains.saved.title', {
                volume,
                machine,
                containers: (names?.containerCodes ?? []).join(', '),
              })}
        </Heading>
        {undoing !== 'done' && record !== undefined && <QueueStatus record={record} />}
        {undoing !== 'done' &&
          rooms.map(({ code, room }) => (
            <Text key={code}>
              {room.isOver
                ? t('drains.saved.overNow', {
                    container: code,
                    volume: formatLitresAs(room.overLitres, unit),
                  })
                : t('drains.saved.room', {
                    container: code,
                    volume: formatLitresAs(room.roomLitres, unit),
                  })}
            </Text>
          ))}
        {undoing !== 'done' && record?.state === 'queued' && (
          <Text kind="hint">{t('drains.form.onlyHere')}</Text>
        )}
        {undoing !== 'done' && <Text kind="hint">{t('drains.saved.after')}</Text>}
        {problem !== undefined && (
          <Notice kind="stop" title={t('drains.saved.undoFailed')}>
            {problem.detail}
          </Notice>
        )}
        {canUndo && (
          <Button
            label={t('drains.saved.undo')}
            icon="back"
            busy={undoing === 'now'}
            onPress={() => void undo()}
          />
        )}
      </Card>
      <Button
        kind="primary"
        isLarge
        isWide
        label={t('drains.saved.sameMachine')}
        onPress={onSameMachine}
      />
      <Button isWide label={t('drains.saved.another')} onPress={onAnother} />
      {record?.number && undoing !== 'done' && (
        <Button
          isWide
          label={t('drains.saved.open', { number: record.number })}
          onPress={() => router.push(`/drains/${record.number}`)}
        />
      )}
      <LinkText href="/yard">{t('session.bar.yard')}</LinkText>
    </View>
  )
}

function roomsAfter(values: DrainValues, choices: DrainChoices) {
  const litres = litresOf(values.typed, values.unit) ?? '0'
  const shares = shareLegs(values.legs, litres, values.unit)
  return values.legs.flatMap(({ containerId }, position) => {
    const container = choices.containers.find(({ id }) => id === containerId)
    const share = shares[position]?.litres
    if (container === undefined || share === undefined) return []
    return [{ code: container.code, room: roomAfter(container, share) }]
  })
}
