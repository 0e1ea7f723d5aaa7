import { useState } from 'react'
import { useShowProblem, type ShownProblem } from '../api/show-problem'
import { useRefreshWhatChanged, whatPouringChanges } from '../api/use-refresh-what-changed'

const whatPickupsChange = [
  ...whatPouringChanges,
  'listPickups',
  'readPickup',
  'readTotals',
  'listMailbox',
]

export type PickupAct = {
  isBusy: boolean
  problem: ShownProblem | undefined
  /** Field code -> words, by the body's path; of the last refusal. */
  fieldErrors: Record<string, string>
  /** Runs an act and fetches again what it changed; false when it was refused. */
  run: (act: () => Promise<unknown>) => Promise<boolean>
}

/** One act of a pickup at a time: busy while it runs, its refusal in place, nothing typed lost. */
export function usePickupAct(): PickupAct {
  const showProblem = useShowProblem('pickups')
  const refreshWhatChanged = useRefreshWhatChanged()
  const [isBusy, setBusy] = useState(false)
  const [problem, setProblem] = useState<ShownProblem>()
  const [fieldErrors, setFieldErrors] = useState<Record<string, string>>({})
  const run = async (act: () => Promise<unknown>) => {
    setBusy(true)
    setProblem(undefined)
    setFieldErrors({})
    try {
      await act()
      await refreshWhatChanged(whatPickupsChange)
      return true
    } catch (error) {
      const refused: Record<string, string> = {}
      setProblem(
        showProblem(error, {
          setError: (name, { message }) => {
            refused[name] = message ?? ''
          },
        }),
      )
      setFieldErrors(refused)
      // Somebody else was faster: what is on screen is read again, what was typed stays.
      await refreshWhatChanged(['readPickup'])
      return false
    } finally {
      setBusy(false)
    }
  }
  return { isBusy, problem, fieldErrors, run }
}
