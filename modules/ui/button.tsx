import { useState, type Ref } from 'react'
import { Pressable, Text as NativeText, type View } from 'react-native'
import { Icon, type IconName } from './icon'
import { fonts, radius, target } from './measures'
import { useColours } from './theme'
import { useTargetHeight } from './use-window-class'

export type ButtonKind = 'primary' | 'secondary' | 'quiet' | 'danger'

/** A button that names its act. `busy` keeps its words, says so and takes no second press. */
export function Button({
  label,
  onPress,
  kind = 'secondary',
  icon,
  busy = false,
  disabled = false,
  isLarge = false,
  isWide = false,
  expanded,
  controls,
  describedBy,
  hint,
  isIconOnly = false,
  ref,
}: {
  label: string
  onPress: () => void
  kind?: ButtonKind
  icon?: IconName
  busy?: boolean
  disabled?: boolean
  /** 64 px: the one primary act of a yard screen. */
  isLarge?: boolean
  /** As wide as its column. */
  isWide?: boolean
  expanded?: boolean
  controls?: string
  describedBy?: string
  /** Said by a screen reader after the label, where the label alone is not enough in a list. */
  hint?: string
  /** Shows the icon alone; the label is still its name. */
  isIconOnly?: boolean
  ref?: Ref<View>
}) {
  const colours = useColours()
  const height = useTargetHeight()
  const [isPressed, setPressed] = useState(false)
  const isOff = disabled || busy
  const looks = {
    primary: {
      back: isPressed ? colours.actPressed : colours.act,
      ink: colours.onAct,
      edge: colours.act,
    },
    secondary: {
      back: isPressed ? colours.well : colours.sheet,
      ink: colours.link,
      edge: colours.edge,
    },
    quiet: {
      back: isPressed ? colours.well : 'transparent',
      ink: colours.link,
      edge: 'transparent',
    },
    danger: {
      back: isPressed ? colours.stop.bg : colours.sheet,
      ink: colours.stop.text,
      edge: colours.stop.edge,
    },
  }[kind]
  const look = disabled
    ? { back: colours.well, ink: colours.inkFaint, edge: colours.hairline }
    : looks
  return (
    <Pressable
      ref={ref}
      role="button"
      aria-label={hint === undefined ? label : `${label}, ${hint}`}
      disabled={disabled}
      aria-busy={busy}
      aria-expanded={expanded}
      aria-controls={controls}
      aria-describedby={describedBy}
      onPress={() => {
        if (!isOff) onPress()
      }}
      onPressIn={() => setPressed(true)}
      onPressOut={() => setPressed(false)}
      style={{
        minHeight: isLarge ? target.primary : height,
        minWidth: height,
        paddingHorizontal: kind === 'quiet' ? 8 : 16,
        paddingVertical: 8,
        borderRadius: radius,
        borderWidth: isPressed ? 2 : 1,
        borderColor: look.edge,
        backgroundColor: look.back,
        flexDirection: 'row',
        alignItems: 'center',
        justifyContent: 'center',
        gap: 8,
        alignSelf: isWide ? 'stretch' : 'flex-start',
        cursor: isOff ? 'auto' : 'pointer',
      }}
    >
      {icon !== undefined && <Icon name={busy ? 'hourglass' : icon} colour={look.ink} />}
      {!isIconOnly && (
        <NativeText
          style={{
            fontFamily: fonts.text,
            fontSize: isLarge ? 20 : 17,
            fontWeight: kind === 'primary' ? '700' : '600',
            color: look.ink,
            textAlign: 'center',
            flexShrink: 1,
          }}
        >
          {label}
        </NativeText>
      )}
    </Pressable>
  )
}
