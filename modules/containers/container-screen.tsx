import { useTranslation } from 'react-i18next'
import { readContainer } from '@/shared/contracts/containers'
import { formatDay } from '@/shared/calendar'
import { formatLitresAs } from '@/shared/quantities/format'
import { CouldNotLoad } from '../api/could-not-load'
import { useContract } from '../api/use-contract'
import { useSite } from '../session/site-provider'
import { Loading } from '../ui/loading'
import { Notice } from '../ui/notice'
import { Screen } from '../ui/screen'
import { Table } from '../ui/table'
import { ContainerCard } from './containers-screen'

/** One container with its newest lines of the book. */
export function ContainerScreen({ code }: { code: string }) {
  const { t } = useTranslation()
  const { site } = useSite()
  const reply = useContract(readContainer, { params: { id: code }, query: {} })
  const unit = site?.volumeUnit ?? 'L'
  const { data } = reply
  return (
    <Screen title={code}>
      {data === undefined && (reply.error ? <CouldNotLoad reply={reply} /> : <Loading />)}
      {data !== undefined && (
        <>
          <ContainerCard container={data} unit={unit} />
          {data.hold !== null && (
            <Notice kind="stop" title={t('containers.held')}>
              {data.hold.reason}
            </Notice>
          )}
          <Table
            caption={t('containers.lines')}
            columns={[
              { key: 'day', label: t('containers.columns.day') },
              { key: 'other', label: t('containers.columns.other') },
              { key: 'moved', label: t('containers.columns.moved'), isFigure: true },
              { key: 'after', label: t('containers.columns.after'), isFigure: true },
            ]}
            rows={data.lines.map((line) => ({
              key: line.movementId,
              cells: [
                formatDay(line.occurredOn),
                line.drain?.number ?? line.pickup?.number ?? line.other,
                formatLitresAs(line.litres, unit),
                formatLitresAs(line.litresAfter, unit),
              ],
            }))}
          />
        </>
      )}
    </Screen>
  )
}
