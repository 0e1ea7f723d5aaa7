import { useState } from 'react'
import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import { reviewMark, type Drain } from '@/shared/contracts/drains'
import type { Mark } from '@/shared/contracts/values'
import type { VolumeUnit } from '@/shared/quantities/units'
import { call } from '../api/call'
import { markWords } from '../api/mark-words'
import { useShowProblem, type ShownProblem } from '../api/show-problem'
import { useRefreshWhatChanged, whatPouringChanges } from '../api/use-refresh-what-changed'
import { useSession } from '../session/use-session'
import { Button } from '../ui/button'
import { Card } from '../ui/card'
import { TextArea } from '../ui/field'
import { Heading } from '../ui/heading'
import { gap } from '../ui/measures'
import { Notice } from '../ui/notice'
import { Status } from '../ui/status'
import { Text } from '../ui/text'
import { momentAt } from './drain-facts-card'

/** What the server found when this was recorded; an officer notes what came of it. */
export function DrainMarks({ drain }: { drain: Drain }) {
  const { t } = useTranslation()
  if (drain.marks.length === 0) return null
  return (
    <Card role="region" label={t('drains.marks.title')}>
      <Heading level={2}>{t('drains.marks.title')}</Heading>
      {drain.marks.map((mark) => (
        <OneMark key={mark.id} mark={mark} drain={drain} />
      ))}
    </Card>
  )
}

function OneMark({ mark, drain }: { mark: Mark; drain: Drain }) {
  const { t } = useTranslation()
  const { can } = useSession()
  const showProblem = useShowProblem('drains')
  const refreshWhatChanged = useRefreshWhatChanged()
  const [note, setNote] = useState('')
  const [isBusy, setBusy] = useState(false)
  const [problem, setProblem] = useState<ShownProblem>()
  const shownIn = { unit: drain.volume.unit as VolumeUnit, timeZone: drain.timeZone }

  async function review() {
    setBusy(true)
    setProblem(undefined)
    try {
      await call(reviewMark, { params: { id: mark.id }, body: { note } })
      await refreshWhatChanged(whatPouringChanges)
    } catch (error) {
      setProblem(showProblem(error))
    } finally {
      setBusy(false)
    }
  }

  return (
    <View style={{ gap: gap.small }}>
      <Status
        kind={mark.reviewedAt === null ? 'check' : 'settled'}
        label={
          mark.reviewedAt === null ? t('drains.states.needs-a-look') : t('drains.marks.closed')
        }
      />
      <Text>{markWords(t, mark, shownIn)}</Text>
      {mark.details.answer !== undefined && (
        <Text kind="label">{t('drains.marks.answer', { answer: mark.details.answer })}</Text>
      )}
      <Text kind="hint">
        {t('drains.marks.raised', { time: momentAt(mark.raisedAt, drain.timeZone) })}
      </Text>
      {mark.reviewedAt !== null && (
        <Text kind="label">
          {t('drains.marks.reviewed', {
            name: mark.reviewedBy ?? '–',
            time: momentAt(mark.reviewedAt, drain.timeZone),
            note: mark.reviewNote ?? '',
          })}
        </Text>
      )}
      {mark.reviewedAt === null && can('review-mark', { siteId: mark.siteId }) && (
        <>
          <TextArea
            label={t('drains.marks.note')}
            rows={2}
            maxLength={500}
            value={note}
            onChange={setNote}
          />
          {problem !== undefined && (
            <Notice kind="stop" title={problem.title}>
              {problem.detail}
            </Notice>
          )}
          <Button
            label={t('drains.marks.review')}
            busy={isBusy}
            disabled={note.trim() === ''}
            onPress={() => void review()}
          />
        </>
      )}
    </View>
  )
}
