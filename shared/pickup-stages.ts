/** Stages of a pickup, in the order the board shows them. */
export const pickupStages = [
  'planned',
  'ready',
  'at-the-gate',
  'signed-out',
  'return-due',
  'differs',
  'settled',
  'voided',
] as const

export type PickupStage = (typeof pickupStages)[number]

/** What is stored; `return-due` is `signed-out` seen after its due day, so a clock decides it, not a writer. */
export type StoredPickupStage = Exclude<PickupStage, 'return-due'>

/**
 * The stage a person sees.
 * @param today the site's local day, YYYY-MM-DD
 */
export function shownStage(pickup: {
  stage: StoredPickupStage
  returnDueOn: string | null
  hasReceived: boolean
  today: string
}): PickupStage {
  const waiting = pickup.stage === 'signed-out' && !pickup.hasReceived
  const late = pickup.returnDueOn !== null && pickup.today > pickup.returnDueOn
  return waiting && late ? 'return-due' : pickup.stage
}

const from: Record<PickupStep, readonly StoredPickupStage[]> = {
  change: ['planned'],
  issue: ['planned'],
  sign: ['ready', 'at-the-gate'],
  receive: ['signed-out', 'differs'],
  settle: ['signed-out', 'differs'],
  void: ['planned', 'ready', 'at-the-gate', 'signed-out'],
}

export type PickupStep = 'change' | 'issue' | 'sign' | 'receive' | 'settle' | 'void'

/** May this step be taken at this stored stage? */
export function stepAllowed(step: PickupStep, stage: StoredPickupStage): boolean {
  return from[step].includes(stage)
}

/** The stored stages a step may start from, for the WHERE clause that takes it. */
export function stagesBefore(step: PickupStep): StoredPickupStage[] {
  return [...from[step]]
}
