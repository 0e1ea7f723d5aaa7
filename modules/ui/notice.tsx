import type { ReactNode } from 'react'
import { View } from 'react-native'
import { Icon } from './icon'
import { gap } from './measures'
import type { StatusKind } from './status'
import { Text } from './text'
import { useColours } from './theme'

/** A message in the page: what happened and what can be done. `stop` is announced at once. */
export function Notice({
  kind,
  title,
  children,
}: {
  kind: StatusKind
  title: string
  children?: ReactNode
}) {
  const { [kind]: look } = useColours()
  return (
    <View
      role={kind === 'stop' ? 'alert' : 'status'}
      style={{
        flexDirection: 'row',
        gap: gap.gutter,
        padding: gap.gutter,
        backgroundColor: look.bg,
        borderColor: look.edge,
        borderWidth: 1,
        borderLeftWidth: 6,
      }}
    >
      <Icon
        name={
          kind === 'stop'
            ? 'warning'
            : kind === 'check'
              ? 'eye'
              : kind === 'settled'
                ? 'tick'
                : 'info'
        }
        colour={look.text}
      />
      <View style={{ flex: 1, gap: gap.tiny }}>
        <Text kind="strong" colour={look.text}>
          {title}
        </Text>
        {typeof children === 'string' ? <Text colour={look.text}>{children}</Text> : children}
      </View>
    </View>
  )
}
