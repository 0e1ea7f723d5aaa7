import { join } from 'node:path'

/** What a reader sees of a page; lengths in points. */
export type ReadPage = {
  width: number
  height: number
  /** All words, one run a line. */
  text: string
  /** Runs of text: where they stand, and how much of their length has ink in it, of 1. */
  texts: { text: string; size: number; left: number; right: number; bottom: number; ink: number }[]
  fonts: string[]
  paths: number
  /** What the QR code on the page says. */
  qr: string | null
}
export type ReadPdf = { title: string; producer: string; madeAt: string; pages: ReadPage[] }

/** Reads a PDF with an independent reader, in Node's own module world, where that reader can be loaded. */
export async function readPdf(bytes: Uint8Array): Promise<ReadPdf> {
  const reader = (await globalThis.importOutside?.(join(__dirname, 'read-pages.mjs'))) as {
    readPages: (base64: string) => Promise<ReadPdf>
  }
  return reader.readPages(Buffer.from(bytes).toString('base64'))
}

/** Words of a page with every kind of white space as one space, as a person reads them. */
export function wordsOf(page: ReadPage | undefined): string {
  return (page?.text ?? '').replaceAll(/\s+/g, ' ')
}
