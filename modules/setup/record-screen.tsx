import { useTranslation } from 'react-i18next'
import { CouldNotLoad } from '../api/could-not-load'
import { useContract } from '../api/use-contract'
import { useCatalogue } from '../session/use-catalogue'
import { useSite } from '../session/site-provider'
import { LinkText } from '../ui/link-text'
import { Loading } from '../ui/loading'
import { NotFoundScreen } from '../ui/not-found-screen'
import { Screen } from '../ui/screen'
import type { SetUpRecord } from './form-values'
import { kindOf, type Kind } from './kinds'
import { PasswordCard } from './password-card'
import { PermitsCard } from './permits-card'
import { RecordForm } from './record-form'
import { nameOf } from './records-screen'
import { RetireCard } from './retire-card'

/** One record, new or to be changed. */
export function RecordScreen({ name, id }: { name: string; id: string }) {
  const kind = kindOf(name)
  return kind === undefined ? <NotFoundScreen /> : <OneRecord kind={kind} id={id} />
}

function OneRecord({ kind, id }: { kind: Kind; id: string }) {
  const { t } = useTranslation()
  const { catalogue } = useCatalogue()
  const { site } = useSite()
  const isNew = id === 'new'
  const reply = useContract(kind.contracts.read, isNew ? null : { params: { id } })
  const record = reply.data as SetUpRecord | undefined
  const isReady = catalogue !== undefined && (isNew || record !== undefined)
  return (
    <Screen
      title={record === undefined ? t(`setup.add.${kind.name}`) : nameOf(record)}
      width="narrow"
      before={<LinkText href={`/setup/${kind.name}`}>{t(`setup.kinds.${kind.name}`)}</LinkText>}
    >
      {!isReady && (reply.error === undefined ? <Loading /> : <CouldNotLoad reply={reply} />)}
      {isReady && (
        <RecordForm kind={kind} record={record} catalogue={catalogue} siteId={site?.id ?? ''} />
      )}
      {record !== undefined && (kind.name === 'haulers' || kind.name === 'facilities') && (
        <PermitsCard kind={kind} record={record} />
      )}
      {record !== undefined && kind.name === 'people' && <PasswordCard personId={record.id} />}
      {record !== undefined && <RetireCard kind={kind} record={record} />}
    </Screen>
  )
}
