import { readdir } from 'node:fs/promises'

import { StartRefusal } from '#server/lib/start-refusal.ts'
import { startEngine } from './engine-client.ts'
import type { EngineClient } from './engine-client.ts'
import type { FolderHold } from './folder-lock.ts'
import { inspectFolder } from './folder-state.ts'

const idleMsBeforeCheckpoint = 30_000

/** Starts the engine on the database of a data folder that this process holds, making the database when the folder is new. */
export async function startFolderEngine(hold: FolderHold, say: (words: string) => void): Promise<EngineClient> {
  const folder = await inspectFolder(hold.folder)
  const isEmpty = await readdir(folder).then((names) => names.length === 0, () => true)
  say(isEmpty ? `Making the database in ${folder}` : `Opening the database in ${folder}`)
  try {
    return await startEngine({ folder, image: null, checkpointAfterMs: idleMsBeforeCheckpoint })
  } catch (error) {
    throw new StartRefusal(
      `The database in ${folder} could not be opened: ${error instanceof Error ? error.message : String(error)}. The folder was left as it is. ` +
        'Try once more; if it says the same, keep a copy of the folder and put a backup in its place.',
    )
  }
}
