import { useTranslation } from 'react-i18next'
import { useControlStyle } from '../ui/field'
import { Text } from '../ui/text'
import { useSite } from './site-provider'

/** Which site's yard is on screen; words only where there is no choice. */
export function SiteSwitch() {
  const { t } = useTranslation()
  const { site, sites, chooseSite, isLoading } = useSite()
  const style = useControlStyle(false)
  if (site === undefined) {
    return <Text kind="label">{isLoading ? '' : t('session.site.none')}</Text>
  }
  if (sites.length === 1) {
    return (
      <Text kind="strong" numberOfLines={1}>
        {site.name}
      </Text>
    )
  }
  return (
    <select
      aria-label={t('session.site.label')}
      value={site.id}
      onChange={(event) => chooseSite(event.target.value)}
      style={{
        ...style,
        minHeight: 44,
        padding: '4px 8px',
        fontWeight: 600,
        textOverflow: 'ellipsis',
      }}
    >
      {sites.map(({ id, name }) => (
        <option key={id} value={id}>
          {name}
        </option>
      ))}
    </select>
  )
}
