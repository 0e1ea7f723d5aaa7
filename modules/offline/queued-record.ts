import type { z } from 'zod'
import type { recordDrainBody } from '@/shared/contracts/drains'
import type { ProblemDocument } from '@/shared/problems'

export type RecordedDrain = z.input<typeof recordDrainBody>

/** States of interface words: queued, sending, accepted, question (accepted, needs a look), refused. */
export type QueueState = 'queued' | 'sending' | 'accepted' | 'question' | 'refused'

/** A drain on its way to the book. Its id is the drain's id, made when the form opened. */
export type QueuedRecord = {
  id: string
  personId: string
  body: RecordedDrain
  /** Names as they were on screen, so that the list reads without a catalogue. */
  machineName: string
  containerCodes: string[]
  state: QueueState
  /** ISO. */
  savedAt: string
  tries: number
  /** ISO; not sent again before it, unless a person asks. */
  nextTryAt: string | null
  lastTriedAt: string | null
  /** Given by the server once accepted: D-25-0028. */
  number: string | null
  acceptedAt: string | null
  refusal: ProblemDocument | null
}

export function isUnsent(record: QueuedRecord): boolean {
  return record.state !== 'accepted' && record.state !== 'question'
}
