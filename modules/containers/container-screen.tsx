import { useRouter } from 'expo-router'
import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import { readContainer } from '@/shared/contracts/containers'
import { AsOf } from '../api/as-of'
import { CouldNotLoad } from '../api/could-not-load'
import { markWords } from '../api/mark-words'
import { useContract } from '../api/use-contract'
import { useSession } from '../session/use-session'
import { useSite } from '../session/site-provider'
import { Button } from '../ui/button'
import { Card, Row } from '../ui/card'
import { Heading } from '../ui/heading'
import { LinkText } from '../ui/link-text'
import { Loading } from '../ui/loading'
import { Notice } from '../ui/notice'
import { Screen } from '../ui/screen'
import { Text } from '../ui/text'
import { ContainerCard } from './container-card'
import { ContainerLines } from './container-lines'
import { HoldDialog } from './hold-dialog'
import { TransferDialog } from './transfer-dialog'

/** One container: what is in it and how it came there; pour in, move on, hold. */
export function ContainerScreen({ code }: { code: string }) {
  const { t } = useTranslation()
  const router = useRouter()
  const { sites } = useSite()
  const { can } = useSession()
  const [lines, setLines] = useState(50)
  const [open, setOpen] = useState<'hold' | 'transfer'>()
  const reply = useContract(readContainer, { params: { id: code }, query: { lines } })
  const { data } = reply
  const site = sites.find(({ id }) => id === data?.siteId)
  const unit = site?.volumeUnit ?? 'L'
  const may = (act: Parameters<typeof can>[0]) =>
    data !== undefined && can(act, { siteId: data.siteId })
  const isFluid = data?.stream.kind === 'fluid'
  return (
    <Screen title={code} before={<LinkText href="/containers">{t('containers.all')}</LinkText>}>
      <AsOf reply={reply} />
      {data === undefined &&
        (reply.error === undefined ? <Loading /> : <CouldNotLoad reply={reply} />)}
      {data !== undefined && (
        <>
          <ContainerCard container={data} unit={unit} isLink={false} />
          {data.hold !== null && (
            <Notice kind="stop" title={t('containers.hold.by', { name: data.hold.heldBy.name })}>
              <Text>{data.hold.reason}</Text>
              {data.hold.halogensPpm !== null && (
                <Text>{t('containers.hold.ppmFact', { ppm: data.hold.halogensPpm })}</Text>
              )}
              <Text kind="hint">{t('containers.hold.meaning')}</Text>
            </Notice>
          )}
          <Row>
            {isFluid && may('record-drain') && (
              <Button
                kind="primary"
                icon="drain"
                label={t('containers.logInto', { code })}
                onPress={() => router.push(`/drains/new?container=${data.id}`)}
              />
            )}
            {isFluid && may('record-transfer') && data.hold === null && (
              <Button label={t('containers.transfer.action')} onPress={() => setOpen('transfer')} />
            )}
            {(data.hold === null ? may('hold-container') : may('release-container')) && (
              <Button
                label={t(data.hold === null ? 'containers.hold.action' : 'containers.hold.release')}
                onPress={() => setOpen('hold')}
              />
            )}
          </Row>
          {data.marks.some(({ reviewedAt }) => reviewedAt === null) && (
            <Card role="region" label={t('containers.states.look')}>
              <Heading level={2}>{t('containers.states.look')}</Heading>
              {data.marks
                .filter(({ reviewedAt }) => reviewedAt === null)
                .map((mark) => (
                  <Text key={mark.id}>
                    {markWords(t, mark, { unit, timeZone: site?.timeZone ?? 'UTC' })}
                  </Text>
                ))}
            </Card>
          )}
          <ContainerLines container={data} unit={unit} />
          {data.hasMoreLines && (
            <Button
              label={t('containers.moreLines')}
              onPress={() => setLines(Math.min(500, lines + 150))}
            />
          )}
          {open === 'hold' && <HoldDialog container={data} onClose={() => setOpen(undefined)} />}
          {open === 'transfer' && (
            <TransferDialog container={data} unit={unit} onClose={() => setOpen(undefined)} />
          )}
        </>
      )}
    </Screen>
  )
}
