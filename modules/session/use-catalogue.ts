import { readCatalogue, type Catalogue } from '@/shared/contracts/set-up'
import { useContract, type ContractReply } from '../api/use-contract'

const nothingAsked = {}

/** What forms choose from: sites, machines, fluids, streams, haulers, facilities. Kept on the phone. */
export function useCatalogue(): ContractReply<typeof readCatalogue> & {
  catalogue: Catalogue | undefined
} {
  const answer = useContract(readCatalogue, nothingAsked)
  return { ...answer, catalogue: answer.data }
}
