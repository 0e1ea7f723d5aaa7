import { useState } from 'react'
import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import type { Question } from '@/shared/contracts/drains'
import { compare, divide, multiply, normalise } from '@/shared/quantities/decimals'
import { formatTyped } from '@/shared/quantities/format'
import { toLitres } from '@/shared/quantities/convert'
import type { VolumeUnit } from '@/shared/quantities/units'
import { Button } from '../ui/button'
import { Card, Stack } from '../ui/card'
import { Field } from '../ui/field'
import { Heading } from '../ui/heading'
import { gap } from '../ui/measures'
import { Text } from '../ui/text'
import { otherUnit, slipFacts, type FactsShown } from '../api/mark-words'
import type { Answered } from './use-save-drain'

/** Ways out of a question that change the drain; the other way is to keep it, with a reason. */
export type QuestionChoice =
  | { kind: 'split' }
  | { kind: 'other-container'; containerCode: string }
  | { kind: 'change-fluid' }
  | { kind: 'change-volume' }
  | { kind: 'set-volume'; typed: string; unit: VolumeUnit }
  | { kind: 'other-machine' }
  | { kind: 'same-drain'; drainId: string | undefined }

type Offer = { label: string; choice: QuestionChoice }

type Props = {
  questions: readonly Question[]
  answered: readonly Answered[]
  byPhone: boolean
  typedVolume: { value: string; unit: VolumeUnit }
  canSplit: boolean
  shownIn: FactsShown
  onChoice: (choice: QuestionChoice) => void
  onKeep: (question: Question, reason: string) => void
  onTakeBack: (question: Question) => void
}

const keepsOf: Record<string, readonly string[]> = {
  'over-fill-line': ['already-poured', 'room-was-there'],
  'wrong-stream': ['already-poured'],
  'container-held': ['already-poured', 'unsure-what-it-is'],
  'container-retired': ['already-poured'],
  'more-than-machine-holds': ['figure-is-right', 'flushed'],
  'looks-like-litres': ['unit-is-right'],
  'looks-like-gallons': ['unit-is-right'],
  'looks-like-saved': ['both-happened'],
}

/** What is asked before saving, in place of the keypad; nothing typed is lost whichever way it goes. */
export function DrainQuestionsPanel(props: Props) {
  const { questions, answered, byPhone } = props
  const { t } = useTranslation()
  return (
    <Card role="region" label={t('drains.questions.title', { count: questions.length })}>
      <Heading level={2} takesFocus>
        {t('drains.questions.title', { count: questions.length })}
      </Heading>
      {questions.map((question, position) => (
        <OneQuestion key={`${question.code} ${position}`} {...props} question={question} />
      ))}
      {answered.map((question) => (
        <View key={question.code} style={{ gap: gap.tiny }}>
          <Text kind="label">{t('drains.questions.kept', { answer: question.answer })}</Text>
          <Button
            kind="quiet"
            label={t('drains.questions.askAgain')}
            onPress={() => props.onTakeBack(question)}
          />
        </View>
      ))}
      {byPhone && <Text kind="hint">{t('drains.questions.whenOffline')}</Text>}
    </Card>
  )
}

function OneQuestion(props: Props & { question: Question }) {
  const { question, shownIn, onChoice, onKeep } = props
  const { t } = useTranslation()
  const [reason, setReason] = useState<string>()
  const { value } = props.typedVolume
  const facts = {
    ...slipFacts(question.code, question.facts, shownIn),
    // As typed: a person looks for the very figure they wrote.
    typed: formatTyped(value, props.typedVolume.unit),
    meant: formatTyped(value, otherUnit(question.code, props.typedVolume.unit)),
  }
  const offers = offersOf(props, (key, values) => t(`drains.questions.choices.${key}`, values))
  return (
    <Stack space={gap.small}>
      <Text kind="strong">
        {t([`drains.questions.${question.code}.text`, 'drains.marks.unknown'], facts)}
      </Text>
      {offers.map(({ label, choice }, position) => (
        <Button
          key={label}
          kind={position === 0 ? 'primary' : 'secondary'}
          isWide
          label={label}
          onPress={() => onChoice(choice)}
        />
      ))}
      {(keepsOf[question.code] ?? []).map((keep) => {
        const words = t(`drains.questions.${question.code}.keeps.${keep}`, facts)
        return <Button key={keep} isWide label={words} onPress={() => onKeep(question, words)} />
      })}
      {reason === undefined ? (
        <Button
          kind="quiet"
          label={t('drains.questions.otherReason')}
          onPress={() => setReason('')}
        />
      ) : (
        <>
          <Field
            label={t('drains.questions.otherReason')}
            value={reason}
            onChange={setReason}
            maxLength={300}
          />
          <Button
            label={t('drains.questions.otherReasonSave')}
            disabled={reason.trim() === ''}
            onPress={() => onKeep(question, reason.trim())}
          />
        </>
      )}
    </Stack>
  )
}

type ChoiceKey =
  | 'split'
  | 'other-container'
  | 'change-fluid'
  | 'change-volume'
  | 'a-tenth'
  | 'other-machine'
  | 'switch-unit'
  | 'same-drain'

function offersOf(
  { question, canSplit, typedVolume }: Props & { question: Question },
  words: (key: ChoiceKey, values?: Record<string, string>) => string,
): Offer[] {
  const { code, facts } = question
  const otherContainer: Offer = {
    label: words('other-container'),
    choice: { kind: 'other-container', containerCode: facts.container ?? '' },
  }
  if (code === 'over-fill-line') {
    const split: Offer = { label: words('split'), choice: { kind: 'split' } }
    return canSplit ? [split, otherContainer] : [otherContainer]
  }
  if (code === 'wrong-stream') {
    return [otherContainer, { label: words('change-fluid'), choice: { kind: 'change-fluid' } }]
  }
  if (code === 'container-held' || code === 'container-retired') return [otherContainer]
  if (code === 'looks-like-litres' || code === 'looks-like-gallons') {
    const unit = otherUnit(code, typedVolume.unit)
    const volume = formatTyped(typedVolume.value, unit)
    return [
      {
        label: words('switch-unit', { volume }),
        choice: { kind: 'set-volume', typed: typedVolume.value, unit },
      },
    ]
  }
  if (code === 'more-than-machine-holds') {
    return [
      ...aTenth(typedVolume, facts.holdsLitres).map(({ value, unit }) => ({
        label: words('a-tenth', { volume: formatTyped(value, unit) }),
        choice: { kind: 'set-volume' as const, typed: value, unit },
      })),
      { label: words('change-volume'), choice: { kind: 'change-volume' } },
      { label: words('other-machine'), choice: { kind: 'other-machine' } },
    ]
  }
  if (code === 'looks-like-saved') {
    return [{ label: words('same-drain'), choice: { kind: 'same-drain', drainId: facts.otherId } }]
  }
  return []
}

/** A missed point is ten times too much: offered where a tenth would fit the machine. */
function aTenth(
  { value, unit }: { value: string; unit: VolumeUnit },
  holdsLitres: string | undefined,
): { value: string; unit: VolumeUnit }[] {
  const tenth = normalise(divide(value, '10', 5))
  const decimals = tenth.split('.')[1]?.length ?? 0
  const fits =
    holdsLitres !== undefined && compare(toLitres(tenth, unit), multiply(holdsLitres, '1.05')) <= 0
  return fits && decimals <= 2 ? [{ value: tenth, unit }] : []
}
