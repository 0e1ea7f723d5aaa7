import { useEffect, useId, useRef, type ReactNode } from 'react'
import { View } from 'react-native'
import { Heading } from './heading'
import { gap, radius } from './measures'
import { useColours } from './theme'

/**
 * A question that must be answered before going on. The browser's own modal dialog keeps the focus inside, closes on
 * Escape and gives the focus back. Buttons name their acts; there is no "yes" and no "no".
 */
export function Dialog({
  title,
  isOpen,
  onClose,
  children,
  actions,
}: {
  title: string
  isOpen: boolean
  onClose: () => void
  children?: ReactNode
  actions: ReactNode
}) {
  const colours = useColours()
  const here = useRef<HTMLDialogElement>(null)
  const titleId = useId()
  useEffect(() => {
    const dialog = here.current
    if (dialog === null) return
    if (isOpen && !dialog.open) {
      dialog.showModal()
      // The browser goes to the first control; where that lies below the fold, reading begins at the title instead.
      if (dialog.scrollHeight > dialog.clientHeight) {
        const heading = document.getElementById(titleId)
        heading?.setAttribute('tabindex', '-1')
        heading?.focus()
        dialog.scrollTop = 0
      }
    }
    if (!isOpen && dialog.open) dialog.close()
  }, [isOpen, titleId])
  if (!isOpen) return null
  return (
    <dialog
      ref={here}
      aria-labelledby={titleId}
      onCancel={(event) => {
        event.preventDefault()
        onClose()
      }}
      style={{
        border: `2px solid ${colours.edge}`,
        borderRadius: radius,
        padding: gap.large,
        maxWidth: 'min(560px, calc(100vw - 24px))',
        width: '100%',
        boxSizing: 'border-box',
        maxHeight: 'calc(100vh - 32px)',
        overflowY: 'auto',
        backgroundColor: colours.sheet,
        color: colours.ink,
      }}
    >
      <View style={{ gap: gap.medium }}>
        <Heading level={2} id={titleId}>
          {title}
        </Heading>
        {children}
        <View style={{ flexDirection: 'row', flexWrap: 'wrap', gap: gap.medium }}>{actions}</View>
      </View>
    </dialog>
  )
}
