import { sql } from 'drizzle-orm'
import { openDatabase } from '../../db/client'

/** Run as a process of its own: opens the folder named on the command line and writes, saying each row once it is in. */
async function writeUntilKilled(folder: string): Promise<void> {
  const { db } = await openDatabase({ folder })
  await db.execute(sql`create table if not exists acknowledged (n int primary key)`)
  for (let n = 1; ; n += 1) {
    await db.transaction(async (tx) => {
      await tx.execute(sql`insert into acknowledged values (${n})`)
    })
    process.stdout.write(`${n}\n`)
  }
}

void writeUntilKilled(process.argv[2] ?? '')
