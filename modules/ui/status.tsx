import { Text as NativeText, View, type ViewStyle } from 'react-native'
import { Icon, type IconName } from './icon'
import { fonts } from './measures'
import { useColours } from './theme'

export type StatusKind = 'settled' | 'check' | 'stop' | 'waiting' | 'voided' | 'note'

const icons: Record<StatusKind, IconName> = {
  settled: 'tick',
  check: 'eye',
  stop: 'bar',
  waiting: 'hourglass',
  voided: 'page',
  note: 'info',
}

/** A state as word, icon and outline shape; colour comes last and says nothing alone. */
export function Status({ kind, label }: { kind: StatusKind; label: string }) {
  const { [kind]: look } = useColours()
  const shapes: Record<StatusKind, ViewStyle> = {
    settled: { borderRadius: 14 },
    check: { borderLeftWidth: 6, borderRadius: 0 },
    stop: { borderWidth: 2, borderRadius: 0, borderBottomRightRadius: 10 },
    waiting: { borderStyle: 'dashed', borderRadius: 4 },
    voided: { borderRadius: 2 },
    note: { borderTopRightRadius: 10, borderRadius: 2 },
  }
  return (
    <View
      style={[
        {
          flexDirection: 'row',
          alignItems: 'center',
          alignSelf: 'flex-start',
          gap: 6,
          minHeight: 28,
          paddingHorizontal: 8,
          paddingVertical: 2,
          borderWidth: 1,
          borderColor: look.edge,
          backgroundColor: look.bg,
        },
        shapes[kind],
      ]}
    >
      <Icon name={icons[kind]} size={16} colour={look.text} />
      <NativeText
        style={{
          fontFamily: fonts.text,
          fontSize: 15,
          fontWeight: '600',
          color: look.text,
          textDecorationLine: kind === 'voided' ? 'line-through' : 'none',
        }}
      >
        {label}
      </NativeText>
    </View>
  )
}
