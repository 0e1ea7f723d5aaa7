import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import { issuePickup, readPickup } from '@/shared/contracts/pickups'
import { formatTyped } from '@/shared/quantities/format'
import { call } from '../api/call'
import { CouldNotLoad } from '../api/could-not-load'
import { openDocument } from '../api/download'
import { useShowProblem } from '../api/show-problem'
import { useContract } from '../api/use-contract'
import { useSession } from '../session/use-session'
import { Button } from '../ui/button'
import { Loading } from '../ui/loading'
import { Notice } from '../ui/notice'
import { Screen } from '../ui/screen'
import { Status } from '../ui/status'
import { Table } from '../ui/table'
import { stageKinds } from './pickups-screen'

/** One pickup: its lines, what issue waits for, and its papers. */
export function PickupScreen({ id }: { id: string }) {
  const { t } = useTranslation()
  const { can } = useSession()
  const showProblem = useShowProblem('pickups')
  const reply = useContract(readPickup, { params: { id } })
  const [refusal, setRefusal] = useState<{ title: string; detail: string } | null>(null)
  const { data } = reply
  const issue = async () => {
    if (data === undefined) return
    try {
      await call(issuePickup, { params: { id: data.id }, body: { version: data.version } })
      await reply.refresh()
    } catch (error) {
      setRefusal(showProblem(error))
    }
  }
  return (
    <Screen title={data?.number ?? t('pickups.one')}>
      {data === undefined && (reply.error ? <CouldNotLoad reply={reply} /> : <Loading />)}
      {refusal !== null && (
        <Notice kind="stop" title={refusal.title}>
          {refusal.detail}
        </Notice>
      )}
      {data !== undefined && (
        <>
          <Status
            kind={stageKinds[data.stage] ?? 'note'}
            label={t(`pickups.stages.${data.stage}`)}
          />
          <Table
            caption={t('pickups.lines')}
            columns={[
              { key: 'container', label: t('pickups.columns.container') },
              { key: 'stream', label: t('pickups.columns.stream') },
              { key: 'shipped', label: t('pickups.columns.shipped'), isFigure: true },
              { key: 'received', label: t('pickups.columns.received'), isFigure: true },
            ]}
            rows={data.lines.map((line) => ({
              key: line.id,
              cells: [
                line.containerCode,
                line.stream.name,
                formatTyped(line.shipped.value, line.shipped.unit),
                line.received === null
                  ? '–'
                  : formatTyped(line.received.quantity.value, line.received.quantity.unit),
              ],
            }))}
          />
          {data.stage === 'planned' && can('issue-pickup', { siteId: data.siteId }) && (
            <Button kind="primary" label={t('pickups.issue')} onPress={() => void issue()} />
          )}
          {data.documents.map((document) => (
            <Button
              key={document.id}
              icon="print"
              label={t('pickups.open', { revision: document.revision })}
              onPress={() => void openDocument(document.id)}
            />
          ))}
        </>
      )}
    </Screen>
  )
}
