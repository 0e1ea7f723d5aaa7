import { useState } from 'react'
import type { UseFormReturn } from 'react-hook-form'
import { useTranslation } from 'react-i18next'
import type { Question } from '@/shared/contracts/drains'
import type { Site } from '@/shared/contracts/set-up'
import { fieldWords } from '../api/field-words'
import { ProblemError } from '../api/problem-error'
import { useShowProblem, type ShownProblem } from '../api/show-problem'
import { useQueue } from '../offline/queue-provider'
import type { RecordedDrain } from '../offline/queued-record'
import { askBeforeSaving, type KnownFacts } from './ask-before-saving'
import { rememberMethod, rememberUnit } from './drain-preferences'
import type { DrainValues } from './drain-values'
import { factsOfValues, type FieldRefusal } from './facts-of-values'
import { forgetDrainDraft } from './use-drain-draft'

export type Answered = Question & { answer: string }

type Asking = { questions: Question[]; byPhone: boolean }

type Surroundings = {
  form: UseFormReturn<DrainValues>
  recordId: string
  personId: string
  site: Site
  known: KnownFacts
  names: (body: RecordedDrain) => { machineName: string; containerCodes: string[] }
}

const noQuestions: Asking = { questions: [], byPhone: false }

/**
 * Save, asked first: fields that cannot be read are said at their field, questions are put in place, then the record
 * is on the phone and sent. A refusal by the server brings the form back with everything typed.
 */
export function useSaveDrain({ form, recordId, personId, site, known, names }: Surroundings) {
  const { t } = useTranslation()
  const queue = useQueue()
  const showProblem = useShowProblem('drains')
  const [isAsking, setAsking] = useState(false)
  const [asked, setAsked] = useState<Asking>(noQuestions)
  const [answered, setAnswered] = useState<Answered[]>([])
  const [problem, setProblem] = useState<ShownProblem>()
  const [isSaved, setSaved] = useState(false)
  const open = asked.questions.filter((question) => !answerTo(question, answered))

  function refuseFields(fields: FieldRefusal[]) {
    fields.forEach(({ path, code }, position) => {
      form.setError(
        path as keyof DrainValues,
        { type: code, message: fieldWords(t, 'drains', { path, code }) },
        { shouldFocus: position === 0 },
      )
    })
  }

  /** @param presets answers given in advance, by question code: a button that says so pressed instead of Save */
  async function save(presets: Record<string, string> = {}): Promise<void> {
    form.clearErrors()
    setProblem(undefined)
    const around = { now: new Date(), timeZone: site.timeZone }
    const read = factsOfValues(form.getValues(), around)
    if (!read.ok) {
      refuseFields(read.fields)
      return
    }
    const body: RecordedDrain = { ...read.facts, id: recordId, siteId: site.id }
    setAsking(true)
    try {
      const found = await askBeforeSaving(body, known)
      setAsked(found)
      const given = [...answered, ...answersInAdvance(found.questions, presets)]
      setAnswered(given)
      if (found.questions.some((question) => !answerTo(question, given))) return
      await keep({ ...body, answers: answersTo(found.questions, given) })
    } catch (error) {
      refuse(error)
    } finally {
      setAsking(false)
    }
  }

  async function keep(body: RecordedDrain): Promise<void> {
    await queue.add({ body, ...names(body) })
    rememberMethod(personId, body.method)
    rememberUnit(site.id, body.volume.unit)
    await forgetDrainDraft(personId)
    setSaved(true)
    // Not awaited by the person: the card is there, the state on it follows.
    void queue.flush({ all: true }).then(() => {
      const refusal = queue.records().find(({ id }) => id === recordId)?.refusal
      if (!refusal) return
      setSaved(false)
      refuse(new ProblemError(refusal))
    })
  }

  function refuse(error: unknown) {
    setProblem(showProblem(error, { setError: form.setError, fieldOf: formFieldOf }))
  }

  return {
    save,
    isAsking,
    problem,
    isSaved,
    /** Questions still without an answer, in the order to show them. */
    openQuestions: open,
    answeredQuestions: answered.filter(({ code }) =>
      asked.questions.some((question) => question.code === code),
    ),
    askedByPhone: asked.byPhone,
    answer: (question: Question, answer: string) =>
      setAnswered((before) => [
        ...before.filter((other) => !isSame(other, question)),
        { ...question, answer },
      ]),
    /** A change of the form answers a question in its own way: it is asked again at the next save if it still stands. */
    dropQuestions: () => setAsked(noQuestions),
    takeBack: (question: Question) =>
      setAnswered((before) => before.filter((other) => !isSame(other, question))),
  }
}

/** The same question about the same figures; with other figures it is another question. */
function isSame(a: Question, b: Question): boolean {
  return a.code === b.code && JSON.stringify(a.facts) === JSON.stringify(b.facts)
}

function answerTo(question: Question, answered: readonly Answered[]): string | undefined {
  return answered.find((given) => isSame(given, question))?.answer
}

function answersInAdvance(
  questions: readonly Question[],
  presets: Record<string, string>,
): Answered[] {
  return questions.flatMap((question) => {
    const answer = presets[question.code]
    return answer === undefined ? [] : [{ ...question, answer }]
  })
}

function answersTo(questions: readonly Question[], answered: readonly Answered[]) {
  return questions.flatMap((question) => {
    const answer = answerTo(question, answered)
    return answer === undefined ? [] : [{ code: question.code, answer }]
  })
}

/** The contract's paths and the form's fields differ where the form keeps text. */
export function formFieldOf(path: string): string {
  if (path.startsWith('volume')) return 'typed'
  if (path.startsWith('machine')) return 'machine'
  if (path === 'occurredAt') return 'time'
  if (path.startsWith('absorbents')) return 'absorbentsTyped'
  if (path.startsWith('refill')) return 'refillTyped'
  return path.replace(/^(legs\.\d+)\.volume.*$/, '$1.typed')
}
