import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import type { Machine } from '@/shared/contracts/set-up'
import { formatLitresAs } from '@/shared/quantities/format'
import type { VolumeUnit } from '@/shared/quantities/units'
import { Button } from '../ui/button'
import { Stack } from '../ui/card'
import { Dialog } from '../ui/dialog'
import { Field } from '../ui/field'
import { Heading } from '../ui/heading'
import { Text } from '../ui/text'
import type { DrainMachine } from './drain-values'
import { machineName, machinesMatching } from './machine-name'
import { PickedRow } from './picked-row'

type Props = {
  machines: readonly Machine[]
  lastMachines: readonly string[]
  siteName: string
  unit: VolumeUnit
  value: DrainMachine
  onChoose: (machine: NonNullable<DrainMachine>) => void
  onClose: () => void
}

/** The last three machines first, then all of the site; one that is not on the list is described in words. */
export function MachinePicker(props: Props) {
  const { machines, lastMachines, siteName, unit, value, onChoose, onClose } = props
  const { t } = useTranslation()
  const [search, setSearch] = useState('')
  const [description, setDescription] = useState(
    value?.kind === 'unlisted' ? value.description : undefined,
  )
  const last = lastMachines
    .flatMap((id) => machines.find((machine) => machine.id === id) ?? [])
    .slice(0, 3)
  const found = machinesMatching(machines, search)

  const row = (machine: Machine) => (
    <PickedRow
      key={machine.id}
      title={machineName(machine)}
      detail={
        machine.systemLitres === null
          ? machine.kind
          : t('drains.machine.holds', {
              kind: machine.kind,
              volume: formatLitresAs(machine.systemLitres, unit, { decimals: 0 }),
            })
      }
      isChosen={value?.kind === 'listed' && value.machineId === machine.id}
      onPress={() => onChoose({ kind: 'listed', machineId: machine.id })}
    />
  )

  return (
    <Dialog
      title={t('drains.machine.title')}
      isOpen
      onClose={onClose}
      actions={<Button label={t('ui.close')} onPress={onClose} />}
    >
      <Stack>
        <Field
          label={t('drains.machine.search')}
          value={search}
          onChange={setSearch}
          inputMode="search"
        />
        {search === '' && last.length > 0 && (
          <Stack space={0}>
            <Heading level={3}>{t('drains.machine.last')}</Heading>
            {last.map(row)}
          </Stack>
        )}
        <Stack space={0}>
          <Heading level={3}>{t('drains.machine.all', { site: siteName })}</Heading>
          {found.length === 0 && <Text>{t('drains.machine.none')}</Text>}
          {found.map(row)}
        </Stack>
        {description === undefined ? (
          <Button
            label={t('drains.machine.unlisted')}
            icon="plus"
            onPress={() => setDescription(search)}
          />
        ) : (
          <Stack>
            <Heading level={3}>{t('drains.machine.unlistedTitle')}</Heading>
            <Field
              label={t('drains.machine.unlistedLabel')}
              hint={t('drains.machine.unlistedHint')}
              value={description}
              onChange={setDescription}
              maxLength={120}
            />
            <Button
              kind="primary"
              label={t('drains.machine.unlistedUse')}
              disabled={description.trim() === ''}
              onPress={() => onChoose({ kind: 'unlisted', description: description.trim() })}
            />
          </Stack>
        )}
      </Stack>
    </Dialog>
  )
}
