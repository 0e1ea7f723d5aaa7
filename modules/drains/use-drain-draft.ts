import { useEffect, useRef, useState } from 'react'
import { useWatch, type Control } from 'react-hook-form'
import { useSite } from '../session/site-provider'
import { useSession } from '../session/use-session'
import { forgetDraft, keepDraft, readDraft } from '../offline/drafts'
import type { DrainValues } from './drain-values'

/** A drain that was begun and not saved: its id stays the same when it is taken up again. */
export type DrainDraft = { recordId: string; siteId: string; values: DrainValues }

/** Typing settles before it is written; a lost half second of typing is the most a killed tab costs. */
const settleMs = 500

function draftKey(personId: string): string {
  return `${personId} drain`
}

/** The draft of this person at this site; a phone that cannot read it starts empty. */
export async function readDrainDraft(
  personId: string,
  siteId: string,
): Promise<DrainDraft | undefined> {
  const draft = (await readDraft(draftKey(personId)).catch(() => undefined)) as
    DrainDraft | undefined
  return draft?.siteId === siteId ? draft : undefined
}

export async function forgetDrainDraft(personId: string): Promise<void> {
  await forgetDraft(draftKey(personId)).catch(() => undefined)
}

/** The draft of this person at the site on screen, for the list of what is on the phone. */
export function useDrainDraft(): DrainDraft | undefined {
  const { person } = useSession()
  const siteId = useSite().site?.id
  const [draft, setDraft] = useState<DrainDraft>()
  useEffect(() => {
    if (siteId === undefined) return
    let isCurrent = true
    void readDrainDraft(person.id, siteId).then((found) => {
      if (isCurrent) setDraft(found)
    })
    return () => {
      isCurrent = false
    }
  }, [person.id, siteId])
  return draft
}

/** Keeps what is typed on the phone, from the first change on, for as long as `isKept`. */
export function useKeptDraft(
  control: Control<DrainValues>,
  draft: { personId: string; recordId: string; siteId: string; isKept: boolean },
): void {
  const values = useWatch({ control }) as DrainValues
  const { personId, recordId, siteId, isKept } = draft
  const first = useRef(values)
  useEffect(() => {
    if (!isKept || values === first.current) return
    const timer = setTimeout(() => {
      void keepDraft(draftKey(personId), { recordId, siteId, values }).catch(() => undefined)
    }, settleMs)
    return () => clearTimeout(timer)
  }, [values, personId, recordId, siteId, isKept])
}
