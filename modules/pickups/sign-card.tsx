import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import { signPickup, type Pickup } from '@/shared/contracts/pickups'
import { call } from '../api/call'
import { newId } from '../api/new-id'
import { openDocument } from '../api/download'
import { useSession } from '../session/use-session'
import { Button } from '../ui/button'
import { Card } from '../ui/card'
import { Checkbox, ChoiceChips } from '../ui/choice'
import { Field, TextArea } from '../ui/field'
import { Heading } from '../ui/heading'
import { SignaturePad, type Strokes } from '../ui/signature-pad'
import { Text } from '../ui/text'
import { Refusal } from './refusal'
import { usePickupAct } from './use-pickup-act'

/** The next signature: read the document, then sign it by hand or by name. The hash of what was read goes with it. */
export function SignCard({ pickup }: { pickup: Pickup }) {
  const { t } = useTranslation()
  const { person } = useSession()
  const act = usePickupAct()
  const party = pickup.signatures.some((one) => one.party === 'generator') ? 'driver' : 'generator'
  const [id] = useState(newId)
  const [name, setName] = useState(party === 'generator' ? person.name : '')
  const [capacity, setCapacity] = useState('')
  const [way, setWay] = useState<'drawn' | 'typed'>('drawn')
  const [strokes, setStrokes] = useState<Strokes | null>(null)
  const [hasRead, setRead] = useState(false)
  const [dispute, setDispute] = useState('')
  const newest = pickup.documents[0]
  const isReady = hasRead && name.trim() !== '' && (way === 'typed' || strokes !== null)
  if (newest === undefined) return null

  const sign = () =>
    act.run(() =>
      call(signPickup, {
        params: { id: pickup.id },
        body: {
          id,
          party,
          name,
          capacity,
          strokes: way === 'drawn' ? strokes : null,
          dispute,
          documentSha256: newest.sha256,
          version: pickup.version,
        },
      }),
    )

  return (
    <Card role="region" label={t(`pickups.sign.${party}Title`)}>
      <Heading level={2}>{t(`pickups.sign.${party}Title`)}</Heading>
      {party === 'driver' && <Text>{t('pickups.sign.handOver')}</Text>}
      <Button
        icon="page"
        label={t('pickups.sign.open')}
        onPress={() => void act.run(() => openDocument(newest.id))}
      />
      <Checkbox label={t('pickups.sign.meaning')} checked={hasRead} onChange={setRead} />
      <Field
        label={t('pickups.sign.name')}
        autoComplete="off"
        maxLength={120}
        value={name}
        onChange={setName}
        error={act.fieldErrors['name']}
      />
      <Field
        label={t('pickups.sign.capacity')}
        maxLength={80}
        value={capacity}
        onChange={setCapacity}
      />
      <ChoiceChips
        label={t('pickups.sign.way')}
        value={way}
        onChange={(value) => setWay(value === 'typed' ? 'typed' : 'drawn')}
        options={[
          { value: 'drawn', label: t('pickups.sign.draw') },
          { value: 'typed', label: t('pickups.sign.type') },
        ]}
      />
      {way === 'drawn' ? (
        <SignaturePad label={t('pickups.sign.pad')} onChange={setStrokes} />
      ) : (
        <Text kind="hint">{t('pickups.sign.typedHint')}</Text>
      )}
      <TextArea
        label={t('pickups.sign.dispute')}
        hint={t('pickups.sign.disputeHint')}
        rows={2}
        maxLength={500}
        value={dispute}
        onChange={setDispute}
      />
      <Refusal problem={act.problem} />
      <Button
        kind="primary"
        isLarge
        icon="pen"
        label={t(`pickups.sign.${party}Act`)}
        busy={act.isBusy}
        disabled={!isReady}
        onPress={() => void sign()}
      />
      {!isReady && <Text kind="hint">{t('pickups.sign.waits')}</Text>}
    </Card>
  )
}
