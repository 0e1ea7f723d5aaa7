import { useTranslation } from 'react-i18next'
import type { Pickup } from '@/shared/contracts/pickups'
import { openDocument } from '../api/download'
import { Button } from '../ui/button'
import { Card, Row } from '../ui/card'
import { Heading } from '../ui/heading'
import { Text } from '../ui/text'
import { Refusal } from './refusal'
import { usePickupAct } from './use-pickup-act'

/** Every revision of the paper, newest first; each opens as the bytes it was issued as. */
export function PickupPapers({ pickup }: { pickup: Pickup }) {
  const { t } = useTranslation()
  const act = usePickupAct()
  if (pickup.documents.length === 0) return null
  return (
    <Card role="region" label={t('pickups.papers.title')}>
      <Heading level={2}>{t('pickups.papers.title')}</Heading>
      <Refusal problem={act.problem} />
      {pickup.documents.map((document) => (
        <Row key={document.id}>
          <Button
            icon="print"
            label={t(`pickups.papers.${document.kind}`, { revision: document.revision })}
            onPress={() => void act.run(() => openDocument(document.id))}
          />
          <Text kind="hint">{t('pickups.papers.pages', { count: document.pages })}</Text>
          <Text kind="hint" label={t('pickups.papers.hash', { hash: document.sha256 })}>
            {t('pickups.papers.hash', { hash: `${document.sha256.slice(0, 16)}…` })}
          </Text>
        </Row>
      ))}
      <Text kind="hint">{t('pickups.papers.notAForm')}</Text>
    </Card>
  )
}
