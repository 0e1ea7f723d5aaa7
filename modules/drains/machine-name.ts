import type { Machine } from '@/shared/contracts/set-up'

/** `M-05 Ordan 620` */
export function machineName(machine: Pick<Machine, 'code' | 'make' | 'model'>): string {
  return [machine.code, machine.make, machine.model].filter((part) => part !== '').join(' ')
}

/** Machines whose code, make, model, kind or serial holds every word typed. */
export function machinesMatching(machines: readonly Machine[], typed: string): Machine[] {
  const words = typed.toLowerCase().split(/\s+/).filter(Boolean)
  return machines.filter((machine) => {
    const text = [machine.code, machine.make, machine.model, machine.kind, machine.serial]
      .join(' ')
      .toLowerCase()
    return words.every((word) => text.includes(word))
  })
}
