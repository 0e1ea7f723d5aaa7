import { useTranslation } from 'react-i18next'
import { readCatalogue } from '@/shared/contracts/set-up'
import { CouldNotLoad } from '../api/could-not-load'
import { useContract } from '../api/use-contract'
import { Loading } from '../ui/loading'
import { Screen } from '../ui/screen'
import { Table } from '../ui/table'

/** What the company works with: sites, machines, haulers, facilities. */
export function SetupScreen() {
  const { t } = useTranslation()
  const reply = useContract(readCatalogue, {})
  const { data } = reply
  const columns = [
    { key: 'code', label: t('setup.code') },
    { key: 'name', label: t('setup.name') },
  ]
  const table = (caption: string, rows: { id: string; code: string; name: string }[]) => (
    <Table
      caption={caption}
      columns={columns}
      rows={rows.map((row) => ({ key: row.id, cells: [row.code, row.name] }))}
    />
  )
  const parties = (rows: { id: string; identificationNumber: string; name: string }[]) =>
    rows.map((row) => ({ id: row.id, code: row.identificationNumber, name: row.name }))
  return (
    <Screen title={t('setup.title')}>
      {data === undefined && (reply.error ? <CouldNotLoad reply={reply} /> : <Loading />)}
      {data !== undefined && (
        <>
          {table(t('setup.sites'), data.sites)}
          {table(
            t('setup.machines'),
            data.machines.map(({ id, code, kind }) => ({ id, code, name: kind })),
          )}
          {table(t('setup.haulers'), parties(data.haulers))}
          {table(t('setup.facilities'), parties(data.facilities))}
        </>
      )}
    </Screen>
  )
}
