import { useTranslation } from 'react-i18next'
import { Stack } from '../ui/card'
import { Text } from '../ui/text'

const beforeDraining = ['cool', 'lower', 'vent', 'stand'] as const
const always = ['oneFluid', 'solvents', 'fillLine', 'never', 'leak'] as const

/** One act per line, before the act; always ends with who is right when they differ. */
export function Cautions({ isShort = false }: { isShort?: boolean }) {
  const { t } = useTranslation()
  const lines = isShort ? beforeDraining : [...beforeDraining, ...always]
  return (
    <Stack>
      <ul style={{ margin: 0, paddingLeft: 22 }}>
        {lines.map((line) => (
          <li key={line} style={{ marginBottom: 6 }}>
            <Text>{t(`yard.cautions.${line}`)}</Text>
          </li>
        ))}
      </ul>
      <Text kind="hint">{t('yard.deferral')}</Text>
    </Stack>
  )
}
