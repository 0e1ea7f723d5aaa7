import { useState, type ReactNode } from 'react'
import { Pressable, View } from 'react-native'
import { gap, target } from '../ui/measures'
import { Text } from '../ui/text'
import { useColours } from '../ui/theme'

type Props = {
  title: string
  detail?: string
  label?: string
  isChosen: boolean
  onPress: () => void
  children?: ReactNode
}

/** One entry of a list to choose from, as high as a gloved finger needs. */
export function PickedRow({ title, detail, label, isChosen, onPress, children }: Props) {
  const colours = useColours()
  const [isPressed, setPressed] = useState(false)
  return (
    <Pressable
      role="button"
      aria-label={label ?? [title, detail].filter(Boolean).join(', ')}
      aria-pressed={isChosen}
      onPress={onPress}
      onPressIn={() => setPressed(true)}
      onPressOut={() => setPressed(false)}
      style={{
        minHeight: target.yard,
        flexDirection: 'row',
        alignItems: 'center',
        gap: gap.gutter,
        paddingHorizontal: gap.gutter,
        paddingVertical: gap.small,
        borderBottomWidth: 1,
        borderColor: colours.hairline,
        borderLeftWidth: 4,
        borderLeftColor: isChosen || isPressed ? colours.act : 'transparent',
        backgroundColor: isChosen ? colours.actWash : isPressed ? colours.well : colours.sheet,
      }}
    >
      <View style={{ flex: 1, minWidth: 0 }}>
        <Text kind="strong">{title}</Text>
        {detail !== undefined && <Text kind="label">{detail}</Text>}
      </View>
      {children}
    </Pressable>
  )
}
