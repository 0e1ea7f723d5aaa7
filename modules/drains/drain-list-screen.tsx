import { useCallback } from 'react'
import { useRouter } from 'expo-router'
import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import { listDrains, type DrainRow } from '@/shared/contracts/drains'
import { formatDay } from '@/shared/calendar'
import { usePages } from '../api/use-pages'
import { useSite } from '../session/site-provider'
import { useCatalogue } from '../session/use-catalogue'
import { useSession } from '../session/use-session'
import { AsOf } from '../api/as-of'
import { Button } from '../ui/button'
import { Heading } from '../ui/heading'
import { EmptyState, Loading } from '../ui/loading'
import { gap } from '../ui/measures'
import { Screen } from '../ui/screen'
import { useWindowClass } from '../ui/use-window-class'
import { DrainFilters, type DrainFilterValues } from './drain-filters'
import { DrainRowCard } from './drain-row-card'
import { DrainsTable } from './drains-table'
import { CouldNotLoad } from '../api/could-not-load'
import { Text } from '../ui/text'

/** Drains of a site, newest first, grouped by day. */
export function DrainListScreen({ filters }: { filters: DrainFilterValues & { site: string } }) {
  const { t } = useTranslation()
  const router = useRouter()
  const { can } = useSession()
  const { site: siteNow, sites } = useSite()
  const { catalogue } = useCatalogue()
  const site = sites.find(({ id, code }) => id === filters.site || code === filters.site) ?? siteNow
  const isDesk = ['desk', 'wide'].includes(useWindowClass())
  const { site: _site, ...values } = filters
  const drains = usePages(
    listDrains,
    site === undefined
      ? null
      : {
          query: {
            siteId: site.id,
            from: asDay(values.from),
            to: asDay(values.to),
            state: stateOf(values.state),
            machineId: values.machine === '' ? undefined : values.machine,
            search: values.search === '' ? undefined : values.search,
          },
        },
  )

  const change = useCallback(
    (changes: Partial<DrainFilterValues>) => {
      // An empty filter leaves the address.
      const set = Object.entries(changes).map(([name, value]) => [
        name,
        value === '' ? undefined : value,
      ])
      router.setParams(Object.fromEntries(set) as Record<string, string | undefined>)
    },
    [router],
  )
  const clear = () => change({ from: '', to: '', state: '', machine: '', search: '' })
  const isFiltered = Object.values(values).some((value) => value !== '')
  const mayLog = site !== undefined && can('record-drain', { siteId: site.id })
  const machines = (catalogue?.machines ?? []).filter(({ siteId }) => siteId === site?.id)
  const siteName = site?.name ?? ''

  return (
    <Screen title={t('drains.title')} width="full">
      <DrainFilters values={values} machines={machines} onChange={change} />
      <AsOf reply={drains} />
      {drains.isLoading && <Loading />}
      {drains.rows === undefined && drains.error !== undefined && <CouldNotLoad reply={drains} />}
      {drains.rows?.length === 0 &&
        (isFiltered ? (
          <EmptyState
            title={t('drains.list.noHits')}
            action={<Button label={t('drains.list.clear')} onPress={clear} />}
          />
        ) : (
          <EmptyState
            title={t('drains.list.empty', { site: siteName })}
            action={
              mayLog ? (
                <Button
                  kind="primary"
                  label={t('drains.list.log')}
                  onPress={() => router.push('/drains/new')}
                />
              ) : undefined
            }
          />
        ))}
      {byDay(drains.rows ?? []).map(({ day, rows }) => (
        <View key={day} style={{ gap: gap.small }}>
          <View style={{ flexDirection: 'row', alignItems: 'baseline', gap: gap.small }}>
            <Heading level={2}>{formatDay(day)}</Heading>
            <Text kind="hint">{t('drains.list.dayCount', { count: rows.length })}</Text>
          </View>
          {isDesk ? (
            <DrainsTable
              caption={`${t('drains.list.caption', { site: siteName })}, ${formatDay(day)}`}
              rows={rows}
            />
          ) : (
            <View>
              {rows.map((row) => (
                <DrainRowCard key={row.id} row={row} />
              ))}
            </View>
          )}
        </View>
      ))}
      {drains.hasMore && (
        <Button
          label={drains.isLoadingMore ? t('drains.list.loadingMore') : t('drains.list.more')}
          busy={drains.isLoadingMore}
          onPress={() => void drains.loadMore().catch(() => undefined)}
        />
      )}
    </Screen>
  )
}

/** Rows come newest first: a day's rows stand together. */
export function byDay(rows: readonly DrainRow[]): { day: string; rows: DrainRow[] }[] {
  const days: { day: string; rows: DrainRow[] }[] = []
  for (const row of rows) {
    const last = days.at(-1)
    if (last?.day === row.occurredOn) last.rows.push(row)
    else days.push({ day: row.occurredOn, rows: [row] })
  }
  return days
}

function stateOf(text: string): 'standing' | 'struck' | 'needs-a-look' | undefined {
  return (['standing', 'struck', 'needs-a-look'] as const).find((state) => state === text)
}

/** A day half typed, or spoiled in a sent link, is not asked for. */
function asDay(text: string): string | undefined {
  return /^\d{4}-\d{2}-\d{2}$/.test(text) ? text : undefined
}
