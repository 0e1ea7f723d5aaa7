import { useRouter } from 'expo-router'
import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import { formatDay } from '@/shared/calendar'
import { CouldNotLoad } from '../api/could-not-load'
import { useContract } from '../api/use-contract'
import { useCatalogue } from '../session/use-catalogue'
import { useSession } from '../session/use-session'
import { Button } from '../ui/button'
import { Row } from '../ui/card'
import { Checkbox } from '../ui/choice'
import { LinkText } from '../ui/link-text'
import { EmptyState, Loading } from '../ui/loading'
import { NotFoundScreen } from '../ui/not-found-screen'
import { Screen } from '../ui/screen'
import { Status } from '../ui/status'
import { Table } from '../ui/table'
import type { SetUpRecord } from './form-values'
import { expiryOf } from './expiry'
import { kindOf, type Kind } from './kinds'

/** All records of one kind. Retired ones are behind a switch: they are never deleted. */
export function RecordsScreen({ name }: { name: string }) {
  const kind = kindOf(name)
  return kind === undefined ? <NotFoundScreen /> : <Records kind={kind} />
}

function Records({ kind }: { kind: Kind }) {
  const { t } = useTranslation()
  const router = useRouter()
  const { can } = useSession()
  const { catalogue } = useCatalogue()
  const [withRetired, setWithRetired] = useState(false)
  const reply = useContract(kind.contracts.list, {})
  const rows = (reply.data as { rows: SetUpRecord[] } | undefined)?.rows
  const shown = rows?.filter(({ retiredAt }) => withRetired || retiredAt === null)
  const siteOf = (record: SetUpRecord) =>
    catalogue?.sites.find(({ id }) => id === record['siteId'])?.code ?? ''
  return (
    <Screen
      title={t(`setup.kinds.${kind.name}`)}
      before={<LinkText href="/setup">{t('setup.title')}</LinkText>}
      actions={
        can(kind.change) && (
          <Button
            kind="primary"
            icon="plus"
            label={t(`setup.add.${kind.name}`)}
            onPress={() => router.push(`/setup/${kind.name}/new`)}
          />
        )
      }
    >
      {rows?.some(({ retiredAt }) => retiredAt !== null) && (
        <Checkbox label={t('setup.withRetired')} checked={withRetired} onChange={setWithRetired} />
      )}
      {shown === undefined &&
        (reply.error === undefined ? <Loading /> : <CouldNotLoad reply={reply} />)}
      {shown?.length === 0 && <EmptyState title={t(`setup.empty.${kind.name}`)} />}
      {shown !== undefined && shown.length > 0 && (
        <Table
          caption={t(`setup.kinds.${kind.name}`)}
          isCaptionHidden
          density="roomy"
          columns={[
            { key: 'name', label: t('setup.columns.name') },
            { key: 'about', label: t('setup.columns.about') },
            { key: 'site', label: t('setup.columns.site') },
            { key: 'state', label: t('setup.columns.state') },
          ]}
          rows={shown.map((record) => ({
            key: record.id,
            cells: [
              <LinkText key="name" href={`/setup/${kind.name}/${record.id}`}>
                {nameOf(record)}
              </LinkText>,
              aboutOf(t, record),
              siteOf(record),
              <StateOf key="state" record={record} />,
            ],
          }))}
        />
      )}
    </Screen>
  )
}

/** Code and name, as far as a record has them. */
export function nameOf(record: SetUpRecord): string {
  return [record['code'], record['name']]
    .filter((part) => typeof part === 'string' && part !== '')
    .join(' · ')
}

function aboutOf(t: ReturnType<typeof useTranslation>['t'], record: SetUpRecord): string {
  const parts = [
    'make',
    'model',
    'kind',
    'fluidName',
    'description',
    'identificationNumber',
    'email',
    'timeZone',
    'labelWords',
  ]
    .map((part) => record[part])
    .filter(
      (part): part is string =>
        typeof part === 'string' && part !== '' && part !== 'fluid' && part !== 'solid',
    )
  if (typeof record['role'] === 'string') parts.unshift(t(`session.roles.${record['role']}`))
  return parts.join(', ')
}

function StateOf({ record }: { record: SetUpRecord }) {
  const { t } = useTranslation()
  const permits = record['permits'] as { endsOn: string; retiredAt: string | null }[] | undefined
  const last = permits
    ?.filter(({ retiredAt }) => retiredAt === null)
    .map(({ endsOn }) => endsOn)
    .sort()
    .at(-1)
  const [today] = useState(() => new Date().toISOString().slice(0, 10))
  return (
    <Row space={4}>
      {record.retiredAt !== null && <Status kind="voided" label={t('setup.retired')} />}
      {last !== undefined && (
        <Status
          kind={expiryOf(last, today).kind}
          label={t(expiryOf(last, today).words, { day: formatDay(last) })}
        />
      )}
    </Row>
  )
}
