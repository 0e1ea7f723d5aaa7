import { useEffect, useRef } from 'react'
import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import { gap } from './measures'
import { Heading } from './heading'
import { useColours } from './theme'

/**
 * At the top of a long form after a refusal: takes the focus and leads to each field.
 * @param errors the same list until the next refusal: a new one takes the focus from whoever is mending the first
 */
export function ErrorSummary({
  errors,
}: {
  errors: readonly { fieldId: string; message: string }[]
}) {
  const { t } = useTranslation()
  const colours = useColours()
  const here = useRef<View>(null)
  const count = errors.length
  useEffect(() => {
    if (count > 0) (here.current as unknown as HTMLElement | null)?.focus()
  }, [count, errors])
  if (count === 0) return null
  return (
    <View
      ref={here}
      role="alert"
      tabIndex={-1}
      style={{
        borderWidth: 3,
        borderColor: colours.stop.edge,
        padding: gap.medium,
        gap: gap.small,
        backgroundColor: colours.sheet,
      }}
    >
      <Heading level={2}>{t('ui.errors.title')}</Heading>
      <ul style={{ margin: 0, paddingLeft: 20, color: colours.stop.text, fontSize: 17 }}>
        {errors.map(({ fieldId, message }) => (
          <li key={fieldId + message}>
            <a
              href={`#${fieldId}`}
              style={{ color: colours.stop.text }}
              onClick={(event) => {
                event.preventDefault()
                const field = document.getElementById(fieldId)
                field?.focus()
              }}
            >
              {message}
            </a>
          </li>
        ))}
      </ul>
    </View>
  )
}
