import { useEffect, useRef } from 'react'
import { useWatch, type Control } from 'react-hook-form'
import { forgetDraft, keepDraft, readDraft } from '../offline/drafts'
import type { DrainValues } from './drain-values'

/** A drain that was begun and not saved: its id stays the same when it is taken up again. */
export type DrainDraft = { recordId: string; siteId: string; values: DrainValues }

/** Typing settles before it is written; a lost half second of typing is the most a killed tab costs. */
const settleMs = 500

export function draftKey(personId: string): string {
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
