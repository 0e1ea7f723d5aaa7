import type { AnyContract } from '@/shared/contracts/contract'
import { ticketDocument } from '@/shared/contracts/pickups'
import { call, callForFile } from './call'
import type { InputOf } from './fetch-reply'

/**
 * Saves the file an endpoint answers with. The bearer token cannot ride on a plain link, so the bytes come as a blob.
 * @throws as `call`
 */
export async function download<C extends AnyContract>(
  contract: C,
  input: InputOf<C>,
  fileName: string,
): Promise<void> {
  const response = await callForFile(contract, input)
  const address = URL.createObjectURL(await response.blob())
  const link = document.createElement('a')
  link.href = address
  link.download = nameIn(response) ?? fileName
  link.click()
  // The browser has taken the bytes once the click's task is over.
  setTimeout(() => URL.revokeObjectURL(address), 10_000)
}

function nameIn(response: Response): string | undefined {
  return /filename="([^"]+)"/.exec(response.headers.get('Content-Disposition') ?? '')?.[1]
}

/**
 * Opens a stored document in a new tab by a short-lived ticket. The tab is opened at once, inside the tap, because a
 * browser blocks one that opens after waiting.
 * @throws as `call`
 */
export async function openDocument(documentId: string): Promise<void> {
  const tab = window.open('', '_blank')
  try {
    const { url } = await call(ticketDocument, { params: { id: documentId } })
    if (tab === null) window.location.assign(url)
    else {
      tab.opener = null
      tab.location.replace(url)
    }
  } catch (error) {
    tab?.close()
    throw error
  }
}
