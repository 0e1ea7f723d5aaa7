import { Link, type Href } from 'expo-router'
import type { ReactNode } from 'react'
import { Text as NativeText, View } from 'react-native'
import { useTranslation } from 'react-i18next'
import { Icon, type IconName } from './icon'
import { fonts, gap, radius } from './measures'
import { useColours } from './theme'
import { useWindowClass } from './use-window-class'

export type ShellItem = {
  label: string
  icon: IconName
  href: Href
  isCurrent: boolean
  count?: number
}

const railWidths = { phone: 0, tablet: 80, desk: 96, wide: 208 }

/**
 * The frame of every screen: a bottom bar on a phone, a rail beside it when there is room. The top line is the same
 * everywhere; `primary` is the one big act above the bar.
 */
export function Shell({
  items,
  top,
  primary,
  children,
}: {
  items: readonly ShellItem[]
  top: ReactNode
  primary?: ReactNode
  children: ReactNode
}) {
  const { t } = useTranslation()
  const colours = useColours()
  const windowClass = useWindowClass()
  const isPhone = windowClass === 'phone'
  const nav = (
    <View
      role="navigation"
      aria-label={t('ui.sections')}
      style={
        isPhone
          ? {
              flexDirection: 'row',
              height: 64,
              backgroundColor: colours.sheet,
              borderTopWidth: 1,
              borderColor: colours.edge,
            }
          : { paddingVertical: gap.gutter, gap: gap.small, paddingHorizontal: 4 }
      }
    >
      {items.map((item) => (
        <NavItem key={item.label} item={item} isBar={isPhone} isBeside={windowClass === 'wide'} />
      ))}
    </View>
  )
  if (isPhone) {
    return (
      <View style={{ flex: 1, minHeight: '100%', backgroundColor: colours.yard }}>
        <View role="banner" data-no-print>
          {top}
        </View>
        <View
          style={{
            flexGrow: 1,
            flexShrink: 0,
            flexBasis: 'auto',
            paddingBottom: primary === undefined ? 72 : 150,
          }}
        >
          {children}
        </View>
        <div
          className="no-print"
          style={{ position: 'fixed', left: 0, right: 0, bottom: 0, zIndex: 10 }}
        >
          {primary !== undefined && (
            <View
              style={{
                padding: gap.small,
                backgroundColor: colours.yard,
                borderTopWidth: 1,
                borderColor: colours.hairline,
              }}
            >
              {primary}
            </View>
          )}
          {nav}
        </div>
      </View>
    )
  }
  return (
    <View
      style={{ flex: 1, flexDirection: 'row', minHeight: '100%', backgroundColor: colours.yard }}
    >
      <div
        className="no-print"
        style={{
          width: railWidths[windowClass],
          flexShrink: 0,
          position: 'sticky',
          top: 0,
          height: '100vh',
          overflowY: 'auto',
          backgroundColor: colours.sheet,
          borderRight: `1px solid ${colours.hairline}`,
        }}
      >
        {nav}
        {primary !== undefined && windowClass === 'wide' && (
          <View style={{ padding: gap.small }}>{primary}</View>
        )}
      </div>
      <View style={{ flex: 1, minWidth: 0 }}>
        <View role="banner" data-no-print>
          {top}
        </View>
        {primary !== undefined && windowClass !== 'wide' && (
          <View style={{ paddingHorizontal: gap.large, paddingTop: gap.small }}>{primary}</View>
        )}
        {children}
      </View>
    </View>
  )
}

function NavItem({
  item,
  isBar,
  isBeside,
}: {
  item: ShellItem
  isBar: boolean
  isBeside: boolean
}) {
  const colours = useColours()
  const ink = item.isCurrent ? colours.act : colours.inkSoft
  return (
    <Link
      href={item.href}
      aria-current={item.isCurrent ? 'page' : undefined}
      style={{
        display: 'flex',
        flexDirection: isBeside ? 'row' : 'column',
        alignItems: 'center',
        justifyContent: isBeside ? 'flex-start' : 'center',
        gap: isBeside ? 12 : 2,
        flex: isBar ? 1 : undefined,
        minHeight: isBar ? 64 : 56,
        paddingHorizontal: isBeside ? 14 : 2,
        borderRadius: isBar ? 0 : radius,
        backgroundColor: item.isCurrent ? colours.actWash : 'transparent',
        borderTopWidth: isBar ? 3 : 0,
        borderLeftWidth: isBar ? 0 : 3,
        borderColor: item.isCurrent ? colours.act : 'transparent',
        textDecorationLine: 'none',
      }}
    >
      <Icon name={item.icon} colour={ink} />
      <NativeText
        numberOfLines={1}
        style={{
          fontFamily: fonts.text,
          fontSize: isBeside ? 17 : 14,
          fontWeight: item.isCurrent ? '700' : '500',
          color: ink,
        }}
      >
        {item.label}
      </NativeText>
    </Link>
  )
}
