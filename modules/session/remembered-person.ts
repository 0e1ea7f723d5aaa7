import { signedInPerson, type SignedInPerson } from '@/shared/contracts/session'

/** Who is signed in on this phone, so that the yard opens without signal. The token is never written anywhere. */
const personKey = 'ebbmark.person'
/** Set when somebody signed out without signal: the server is told at the next chance. */
const endKey = 'ebbmark.end-session'

export function rememberPerson(person: SignedInPerson): void {
  localStorage.setItem(personKey, JSON.stringify(person))
  localStorage.removeItem(endKey)
}

export function rememberedPerson(): SignedInPerson | undefined {
  const text = localStorage.getItem(personKey)
  if (text === null) return undefined
  try {
    return signedInPerson.parse(JSON.parse(text))
  } catch {
    // Written by an older version: the sign-in page is the way back.
    localStorage.removeItem(personKey)
    return undefined
  }
}

export function forgetPerson(): void {
  localStorage.removeItem(personKey)
}

export function oweSessionEnd(isOwed: boolean): void {
  if (isOwed) localStorage.setItem(endKey, 'yes')
  else localStorage.removeItem(endKey)
}

export function owesSessionEnd(): boolean {
  return localStorage.getItem(endKey) !== null
}

/** Another tab signed in or out: this one must not go on as somebody else. */
export function onPersonChangedElsewhere(listener: () => void): () => void {
  const heard = (event: StorageEvent) => {
    if (event.key === personKey || event.key === null) listener()
  }
  window.addEventListener('storage', heard)
  return () => window.removeEventListener('storage', heard)
}
