import { readdir } from 'node:fs/promises'

import { drizzle } from 'drizzle-orm/pglite'
import type { PGlite } from '@electric-sql/pglite'

import { StartRefusal } from '#server/lib/start-refusal.ts'
import { isAnswering } from './client.ts'
import type { Database, Db } from './client.ts'
import { startEngine } from './engine-client.ts'
import type { EngineClient } from './engine-client.ts'
import type { FolderHold } from './folder-lock.ts'
import { inspectFolder } from './folder-state.ts'
import { migrate } from './migrate.ts'
import { guardOuterClient } from './transaction-guard.ts'

const idleMsBeforeCheckpoint = 30_000

/** Opens the database in a data folder that this process holds, making it when the folder is new. */
export async function openFolder(hold: FolderHold, say: (words: string) => void): Promise<Database> {
  const folder = await inspectFolder(hold.folder)
  const isEmpty = await readdir(folder).then((names) => names.length === 0, () => true)
  say(isEmpty ? `Making the database in ${folder}` : `Opening the database in ${folder}`)
  const client = await startEngine({ folder, image: null, checkpointAfterMs: idleMsBeforeCheckpoint }).catch((error: unknown) => {
    throw new StartRefusal(
      `The database in ${folder} could not be opened: ${error instanceof Error ? error.message : String(error)}. The folder was left as it is. ` +
        'Try once more; if it says the same, keep a copy of the folder and put a backup in its place.',
    )
  })
  return toDatabase(client, say)
}

/** Opens a database in memory that begins with an image (see `image` of the client), or empty: for tests. */
export async function openInMemory(image: Uint8Array<ArrayBuffer> | null): Promise<Database & { readonly image: () => Promise<Uint8Array<ArrayBuffer>> }> {
  const client = await startEngine({ folder: null, image, checkpointAfterMs: idleMsBeforeCheckpoint })
  return { ...(await toDatabase(client, () => undefined)), image: client.image }
}

async function toDatabase(client: EngineClient, say: (words: string) => void): Promise<Database> {
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
