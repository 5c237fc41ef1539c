import type { PGlite } from '@electric-sql/pglite'
import { drizzle } from 'drizzle-orm/pglite'

import { isAnswering } from './client.ts'
import type { Database, Db } from './client.ts'
import { startEngine } from './engine-client.ts'
import type { EngineClient } from './engine-client.ts'
import { migrate } from './migrate.ts'
import { guardOuterClient } from './transaction-guard.ts'

/** Makes a database of a started engine, at this version's schema. */
export async function toDatabase(client: EngineClient, say: (words: string) => void): Promise<Database> {
  const close = (deadlineMs = 5_000): Promise<void> => client.close(deadlineMs)
  // The driver calls `query` and `transaction` of its client and nothing else; ours has both.
  const db = guardOuterClient(drizzle({ client: client as unknown as PGlite }) as unknown as Db)
  try {
    const { before, after } = await migrate(db)
    if (before < after) say(`Brought the database to schema ${after}`)
    return { engine: 'pglite', db, isNew: before === 0, isAnswering: () => isAnswering(db), lost: client.lost, close }
  } catch (error) {
    await close()
    throw error
  }
}

/** Opens a database in memory that begins with an image (see `image` of the client), or empty: for tests. */
export async function openInMemory(image: Uint8Array<ArrayBuffer> | null): Promise<Database & { readonly image: () => Promise<Uint8Array<ArrayBuffer>> }> {
  const client = await startEngine({ folder: null, image, checkpointAfterMs: 0 })
  return { ...(await toDatabase(client, () => undefined)), image: client.image }
}
