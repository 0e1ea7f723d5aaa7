import { useState } from 'react'
import { useShowProblem, type ShownProblem } from '../api/show-problem'

/** One act that changes nothing here: busy while it runs, its refusal in place. */
export function useAct() {
  const showProblem = useShowProblem('books')
  const [isBusy, setBusy] = useState(false)
  const [problem, setProblem] = useState<ShownProblem>()
  const start = async (act: () => Promise<unknown>) => {
    setBusy(true)
    setProblem(undefined)
    try {
      await act()
    } catch (error) {
      setProblem(showProblem(error))
    } finally {
      setBusy(false)
    }
  }
  return { isBusy, problem, run: (act: () => Promise<unknown>) => void start(act) }
}
