import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import { useUnsentCount } from '../offline/queue-provider'
import { fonts, gap, target } from '../ui/measures'
import { LinkText } from '../ui/link-text'
import { Text } from '../ui/text'
import { useColours } from '../ui/theme'
import { useWindowClass } from '../ui/use-window-class'
import { PersonMenu } from './person-menu'
import { SiteSwitch } from './site-switch'
import type { ReactNode } from 'react'

/** The same on every screen: product, site, what is still on this phone, the person. */
export function TopLine({ help }: { help: ReactNode }) {
  const { t } = useTranslation()
  const colours = useColours()
  const windowClass = useWindowClass()
  const unsent = useUnsentCount()
  const isPhone = windowClass === 'phone'
  return (
    <View
      style={{
        minHeight: target.yard,
        flexDirection: 'row',
        alignItems: 'center',
        gap: gap.small,
        paddingHorizontal: isPhone ? gap.gutter : gap.large,
        backgroundColor: colours.sheet,
        borderBottomWidth: 1,
        borderColor: colours.hairline,
      }}
    >
      {!isPhone && (
        <Text kind="strong" style={{ fontFamily: fonts.heading, fontSize: 22 }}>
          {t('session.product')}
        </Text>
      )}
      <View style={{ flex: 1, minWidth: 0, maxWidth: 360 }}>
        <SiteSwitch />
      </View>
      {!isPhone && <View style={{ flex: 1 }} />}
      {unsent > 0 && (
        <LinkText href="/drains/unsent">{t('session.unsent.link', { count: unsent })}</LinkText>
      )}
      <View>
        <PersonMenu help={help} />
      </View>
    </View>
  )
}
