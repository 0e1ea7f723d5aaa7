import { useEffect, type ReactNode } from 'react'
import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import { Heading } from './heading'
import { gap } from './measures'
import { useWindowClass } from './use-window-class'

/**
 * One screen: the page's main landmark, its title in the tab and as the heading that takes the focus when it opens.
 */
export function Screen({
  title,
  children,
  actions,
  width = 'usual',
  before,
}: {
  title: string
  children: ReactNode
  /** Beside the heading on a wide window, under it on a phone. */
  actions?: ReactNode
  width?: 'narrow' | 'usual' | 'full'
  /** Above the heading: a way back. */
  before?: ReactNode
}) {
  const { t } = useTranslation()
  const windowClass = useWindowClass()
  useEffect(() => {
    document.title = t('ui.title', { page: title })
  }, [title, t])
  const side = windowClass === 'phone' ? gap.gutter : gap.large
  return (
    <View
      role="main"
      id="main"
      style={{
        // Never shorter than what it holds, so that its padding clears the bar.
        flexGrow: 1,
        flexShrink: 0,
        flexBasis: 'auto',
        width: '100%',
        maxWidth: { narrow: 680, usual: 1080, full: 1600 }[width],
        paddingHorizontal: side,
        paddingTop: gap.gutter,
        paddingBottom: gap.huge,
        gap: gap.medium,
      }}
    >
      {before}
      <View
        style={{
          flexDirection: 'row',
          flexWrap: 'wrap',
          gap: gap.medium,
          justifyContent: 'space-between',
          alignItems: 'flex-end',
        }}
      >
        <View style={{ flexShrink: 1, minWidth: 200 }}>
          <Heading level={1} takesFocus>
            {title}
          </Heading>
        </View>
        {actions !== undefined && (
          <View style={{ flexDirection: 'row', flexWrap: 'wrap', gap: gap.small, flexShrink: 1 }}>
            {actions}
          </View>
        )}
      </View>
      {children}
    </View>
  )
}
