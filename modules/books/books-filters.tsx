import { useTranslation } from 'react-i18next'
import { groupings, listYears, shownUnits } from '@/shared/contracts/books'
import { useContract } from '../api/use-contract'
import { useCatalogue } from '../session/use-catalogue'
import { useSite } from '../session/site-provider'
import { Row } from '../ui/card'
import { ChoiceChips } from '../ui/choice'
import { Select } from '../ui/field'
import type { BooksAddress } from './books-address'

const nothing = { query: {} }

/** Year, site, stream, grouping and unit of the table. */
export function BooksFilters({
  address,
  onChange,
}: {
  address: BooksAddress
  onChange: (more: Partial<BooksAddress>) => void
}) {
  const { t } = useTranslation()
  const { sites } = useSite()
  const { catalogue } = useCatalogue()
  const years = useContract(listYears, nothing).data?.years ?? []
  const shownYears = years.includes(address.year) ? years : [address.year, ...years]
  return (
    <div className="no-print">
      <Row space={16} align="flex-end">
        <Select
          label={t('books.filters.year')}
          value={String(address.year)}
          onChange={(year) => onChange({ year: Number(year) })}
          options={shownYears.map((year) => ({ value: String(year), label: String(year) }))}
        />
        <Select
          label={t('books.filters.site')}
          placeholder={t('books.filters.everySite')}
          value={address.siteId}
          onChange={(siteId) => onChange({ siteId })}
          options={sites.map(({ id, name }) => ({ value: id, label: name }))}
        />
        <Select
          label={t('books.filters.stream')}
          placeholder={t('books.filters.everyStream')}
          value={address.streamId}
          onChange={(streamId) => onChange({ streamId })}
          options={(catalogue?.streams ?? []).map(({ id, name }) => ({ value: id, label: name }))}
        />
        <ChoiceChips
          label={t('books.filters.by')}
          value={address.by}
          onChange={(by) => onChange({ by: groupings.find((one) => one === by) ?? 'stream' })}
          options={groupings.map((by) => ({ value: by, label: t(`books.groupings.${by}`) }))}
        />
        <ChoiceChips
          label={t('books.filters.unit')}
          value={address.unit}
          onChange={(unit) => onChange({ unit: shownUnits.find((one) => one === unit) ?? 'L' })}
          options={shownUnits.map((unit) => ({
            value: unit,
            label: t(`units.${unit}`, { count: 2 }),
          }))}
        />
      </Row>
    </div>
  )
}
