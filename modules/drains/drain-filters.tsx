import { useEffect, useState } from 'react'
import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import type { Machine } from '@/shared/contracts/set-up'
import { Button } from '../ui/button'
import { Field, Select } from '../ui/field'
import { gap } from '../ui/measures'
import { useWindowClass } from '../ui/use-window-class'
import { machineName } from './machine-name'

/** As in the URL: empty is not asked. */
export type DrainFilterValues = {
  from: string
  to: string
  state: string
  machine: string
  search: string
}

type Props = {
  values: DrainFilterValues
  machines: readonly Machine[]
  onChange: (changes: Partial<DrainFilterValues>) => void
}

/** Typing in the search is asked once it settles. */
const settleMs = 350

/** Filters of the list; they live in the URL, so that a view can be sent to a colleague. */
export function DrainFilters({ values, machines, onChange }: Props) {
  const { t } = useTranslation()
  const windowClass = useWindowClass()
  const isPhone = windowClass === 'phone'
  const hasFilters =
    values.from !== '' || values.to !== '' || values.state !== '' || values.machine !== ''
  const [isOpened, setOpened] = useState(hasFilters)
  const [search, setSearch] = useState(values.search)

  useEffect(() => {
    if (search === values.search) return
    const timer = setTimeout(() => onChange({ search }), settleMs)
    return () => clearTimeout(timer)
  }, [search, values.search, onChange])

  const isOpen = isOpened || !isPhone
  const column = { minWidth: isPhone ? 150 : 170, flexGrow: isPhone ? 1 : 0 } as const
  return (
    <View role="group" aria-label={t('drains.list.filters')} style={{ gap: gap.gutter }}>
      <View
        style={{ flexDirection: 'row', flexWrap: 'wrap', gap: gap.gutter, alignItems: 'flex-end' }}
      >
        <View style={{ flexGrow: 1, minWidth: 200, maxWidth: 420 }}>
          <Field
            label={t('drains.list.search')}
            hint={isPhone ? undefined : t('drains.list.searchHint')}
            type="search"
            inputMode="search"
            maxLength={60}
            value={search}
            onChange={setSearch}
            onSubmit={() => onChange({ search })}
          />
        </View>
        {isPhone && (
          <Button
            label={t('drains.list.filters')}
            expanded={isOpen}
            onPress={() => setOpened(!isOpened)}
          />
        )}
      </View>
      {isOpen && (
        <View
          style={{
            flexDirection: 'row',
            flexWrap: 'wrap',
            gap: gap.gutter,
            alignItems: 'flex-end',
          }}
        >
          <View style={column}>
            <Field
              label={t('drains.list.from')}
              type="date"
              value={values.from}
              onChange={(from) => onChange({ from })}
            />
          </View>
          <View style={column}>
            <Field
              label={t('drains.list.to')}
              type="date"
              value={values.to}
              onChange={(to) => onChange({ to })}
            />
          </View>
          <View style={column}>
            <Select
              label={t('drains.list.state')}
              placeholder={t('drains.list.anyState')}
              value={values.state}
              onChange={(state) => onChange({ state })}
              options={(['needs-a-look', 'standing', 'struck'] as const).map((state) => ({
                value: state,
                label: t(`drains.states.${state}`),
              }))}
            />
          </View>
          <View style={column}>
            <Select
              label={t('drains.list.machine')}
              placeholder={t('drains.list.anyMachine')}
              value={values.machine}
              onChange={(machine) => onChange({ machine })}
              options={machines.map((machine) => ({
                value: machine.id,
                label: machineName(machine),
              }))}
            />
          </View>
        </View>
      )}
    </View>
  )
}
