import { useState } from 'react'
import { Pressable, View } from 'react-native'
import { Icon, type IconName } from '../ui/icon'
import { gap, radius, target } from '../ui/measures'
import { Text } from '../ui/text'
import { useColours } from '../ui/theme'

type Props = {
  label: string
  /** What is chosen; undefined while nothing is. */
  value: string | undefined
  placeholder: string
  detail?: string
  icon: IconName
  hasError: boolean
  onPress: () => void
}

/** A row that opens a list to choose from: the whole row is the target, 56 px high. */
export function PickRow({ label, value, placeholder, detail, icon, hasError, onPress }: Props) {
  const colours = useColours()
  const [isPressed, setPressed] = useState(false)
  return (
    <Pressable
      role="button"
      aria-label={`${label}: ${[value ?? placeholder, detail].filter(Boolean).join(', ')}`}
      aria-haspopup="dialog"
      onPress={onPress}
      onPressIn={() => setPressed(true)}
      onPressOut={() => setPressed(false)}
      style={{
        height: target.yard,
        flexDirection: 'row',
        alignItems: 'center',
        gap: gap.small,
        paddingHorizontal: gap.gutter,
        borderRadius: radius,
        borderWidth: isPressed ? 2 : hasError ? 3 : 1,
        borderColor: hasError ? colours.stop.edge : colours.edge,
        backgroundColor: isPressed ? colours.well : colours.sheet,
      }}
    >
      <Icon name={icon} colour={colours.inkSoft} />
      <View style={{ flex: 1, minWidth: 96 }}>
        <Text kind="label" numberOfLines={1} style={{ lineHeight: 18 }}>
          {label}
        </Text>
        <Text
          kind={value === undefined ? 'body' : 'strong'}
          numberOfLines={1}
          style={{ lineHeight: 24 }}
        >
          {value ?? placeholder}
        </Text>
      </View>
      {detail !== undefined && (
        <Text kind="label" numberOfLines={1} style={{ maxWidth: '62%', textAlign: 'right' }}>
          {detail}
        </Text>
      )}
      <Icon name="down" size={20} colour={colours.inkSoft} />
    </Pressable>
  )
}
