import { openDatabase } from '@/db/client'
import { migrateDatabase } from '@/db/migrate'
import { asService } from '@/db/tenancy'
import { checkBook } from './book/check-book'
import { readConfig } from './config'

/** `npm run check:book`: says that the book is sound, or what is not, and ends with 1. */
async function main(): Promise<number> {
  const config = readConfig(process.env)
  const opened = await openDatabase({ url: config.databaseUrl, folder: config.dataFolder })
  try {
    await migrateDatabase(opened)
    const { movements, accounts, findings } = await asService(opened.db, checkBook, {
      isolationLevel: 'repeatable read',
    })
    for (const { code, detail } of findings) process.stdout.write(`${code}: ${detail}\n`)
    if (findings.length > 0) return 1
    process.stdout.write(`the book is sound: ${movements} movements, ${accounts} accounts\n`)
    return 0
  } finally {
    await opened.close()
  }
}

main().then(
  (code) => {
    process.exitCode = code
  },
  (error: unknown) => {
    process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`)
    process.exitCode = 1
  },
)
