const storageKey = 'ebbmark.cautions-hidden'

/** Hidden for one day of the site only: tomorrow they are read again. */
export function areCautionsHidden(day: string): boolean {
  return localStorage.getItem(storageKey) === day
}

export function hideCautions(day: string): void {
  localStorage.setItem(storageKey, day)
}

export function showCautions(): void {
  localStorage.removeItem(storageKey)
}
