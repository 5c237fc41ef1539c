import type { Database } from './client.ts'
import { startFolderEngine } from './folder-engine.ts'
import type { FolderHold } from './folder-lock.ts'

/** Where the database is: in the data folder that this process holds, or on a PostgreSQL server. */
export type DatabasePlace = { readonly hold: FolderHold } | { readonly databaseUrl: string }

/** Opens the database and brings it to this version's schema; a `StartRefusal` says in words why that can't be. `say` hears of each stage. */
export async function openDatabase(place: DatabasePlace, say: (words: string) => void = () => undefined): Promise<Database> {
  if ('databaseUrl' in place) {
    const { openPostgres } = await import('./postgres.ts')
    return openPostgres(place.databaseUrl, say)
  }
  // The engine starts in its thread while this one loads what speaks to it.
  const [client, { toDatabase }] = await Promise.all([startFolderEngine(place.hold, say), import('./pglite.ts')])
  return toDatabase(client, say)
}
