import { useState } from 'react'
import type { z } from 'zod'
import type { AnyContract, Contract, ReplyOf } from '@/shared/contracts/contract'
import { call } from './call'
import type { InputOf } from './fetch-reply'
import { useContract, type ContractReply } from './use-contract'

type Page = { rows: unknown[]; next: string | null }
type PagedContract = AnyContract & Contract<z.ZodType, z.ZodType, z.ZodType, z.ZodType<Page>>
type RowOf<C extends PagedContract> = ReplyOf<C>['rows'][number]

type Further<Row> = { of: Page | undefined; rows: Row[]; next: string | null }

export type Pages<C extends PagedContract> = Omit<ContractReply<C>, 'data'> & {
  rows: RowOf<C>[] | undefined
  hasMore: boolean
  isLoadingMore: boolean
  loadMore: () => Promise<void>
}

/**
 * A list that comes in keyset pages: the first is cached, further ones are fetched when asked for and dropped when
 * the first one changes, because then they no longer join up.
 */
export function usePages<C extends PagedContract>(contract: C, input: InputOf<C> | null): Pages<C> {
  const first = useContract(contract, input)
  const page = first.data as { rows: RowOf<C>[]; next: string | null } | undefined
  const [further, setFurther] = useState<Further<RowOf<C>>>({
    of: undefined,
    rows: [],
    next: null,
  })
  const [isLoadingMore, setLoadingMore] = useState(false)
  const joins = page !== undefined && further.of === page
  const next = joins ? further.next : (page?.next ?? null)
  const { data: _firstPage, ...state } = first

  async function loadMore() {
    if (input === null || page === undefined || next === null) return
    setLoadingMore(true)
    try {
      const asked = input as { query?: Record<string, unknown> }
      const more = (await call(contract, {
        ...input,
        query: { ...asked.query, cursor: next },
      } as InputOf<C>)) as { rows: RowOf<C>[]; next: string | null }
      setFurther({
        of: page,
        rows: [...(joins ? further.rows : []), ...more.rows],
        next: more.next,
      })
    } finally {
      setLoadingMore(false)
    }
  }

  return {
    ...state,
    rows: page === undefined ? undefined : [...page.rows, ...(joins ? further.rows : [])],
    hasMore: next !== null,
    isLoadingMore,
    loadMore,
  }
}
