import type { RecordedDrain } from '../offline/queued-record'
import { machineName } from './machine-name'
import type { DrainChoices } from './use-drain-choices'

/** Names for the list of what is on the phone, as they are now: it must read without a catalogue. */
export function namesOfDrain(
  body: Pick<RecordedDrain, 'machine' | 'legs'>,
  choices: Pick<DrainChoices, 'machines' | 'containers'>,
): { machineName: string; containerCodes: string[] } {
  const chosen = body.machine
  const machine =
    chosen.kind === 'listed'
      ? choices.machines.find(({ id }) => id === chosen.machineId)
      : undefined
  return {
    machineName:
      chosen.kind === 'unlisted'
        ? chosen.description
        : machine === undefined
          ? '–'
          : machineName(machine),
    containerCodes: body.legs.map(
      ({ containerId }) => choices.containers.find(({ id }) => id === containerId)?.code ?? '–',
    ),
  }
}
