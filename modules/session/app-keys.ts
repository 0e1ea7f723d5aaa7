import { useEffect } from 'react'

const storageKey = 'ebbmark.keys'

export function areKeysOn(): boolean {
  return localStorage.getItem(storageKey) !== 'off'
}

export function switchKeys(isOn: boolean): void {
  localStorage.setItem(storageKey, isOn ? 'on' : 'off')
}

/** Single keys of the whole app, deaf while text is typed or a dialog is open. `/` goes to the page's search field. */
export function useAppKeys(acts: { newDrain: (() => void) | undefined; list: () => void }): void {
  const { newDrain, list } = acts
  useEffect(() => {
    const hear = (event: KeyboardEvent) => {
      if (event.ctrlKey || event.metaKey || event.altKey || !areKeysOn()) return
      const at = event.target instanceof Element ? event.target : null
      if (at?.closest('input, textarea, select, dialog, [contenteditable]')) return
      if (document.querySelector('dialog[open]') !== null) return
      if (event.key === 'n' && newDrain !== undefined) newDrain()
      else if (event.key === '?') list()
      else if (event.key !== '/' || !focusSearch()) return
      event.preventDefault()
    }
    document.addEventListener('keydown', hear)
    return () => document.removeEventListener('keydown', hear)
  }, [newDrain, list])
}

function focusSearch(): boolean {
  const field = document.querySelector<HTMLInputElement>('#main input[type="search"]')
  field?.focus()
  return field !== null
}
