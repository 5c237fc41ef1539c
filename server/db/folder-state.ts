import { constants } from 'node:fs'
import { access, readdir, readFile, statfs } from 'node:fs/promises'
import { join } from 'node:path'

import { StartRefusal } from '#server/lib/start-refusal.ts'
import { toFolderRefusal, toNoSpaceWords } from './folder-lock.ts'

/** PostgreSQL major version inside the pinned engine; a folder of another one can't be opened by it. */
export const engineMajor = '18'

/** A new database takes about 60 MB with its first log file; an old one needs room for the next log file to open at all. */
const bytesNeeded = { new: 160 * 1024 * 1024, old: 48 * 1024 * 1024 }

/** Without any of these a database folder is not whole (the first names its PostgreSQL version). */
const partsOfWholeFolder = ['PG_VERSION', 'base', 'global/pg_control']

/**
 * Looks at the data folder before anything opens it, and answers the path of the database inside. Refused in words, with the folder
 * left as it is: a half-made one, one of another PostgreSQL version, one without the right to write, one on a full disk.
 */
export async function inspectFolder(folder: string): Promise<string> {
  const database = join(folder, 'database')
  try {
    const inside = await readdir(folder)
    if (inside.includes('PG_VERSION')) throw new StartRefusal(toForeignWords(folder))
    const isNew = (await readdir(database).catch(orNothing)).length === 0
    if (!isNew) {
      await refuseHalfMade(database)
      await refuseOtherMajor(database)
      await access(database, constants.R_OK | constants.W_OK)
      await access(join(database, 'global/pg_control'), constants.R_OK | constants.W_OK)
    }
    await refuseFullDisk(folder, isNew ? bytesNeeded.new : bytesNeeded.old)
    return database
  } catch (error) {
    throw toFolderRefusal(error, folder)
  }
}

async function refuseHalfMade(database: string): Promise<void> {
  const missing: string[] = []
  for (const part of partsOfWholeFolder) {
    await access(join(database, part)).catch((error: NodeJS.ErrnoException) => {
      if (error.code !== 'ENOENT' && error.code !== 'ENOTDIR') throw error
      missing.push(part)
    })
  }
  if (missing.length === 0) return
  throw new StartRefusal(
    `The database folder ${database} is not whole: ${missing.join(', ')} ${missing.length === 1 ? 'is' : 'are'} missing, as after an interrupted first start or copy. ` +
      'It was left as it is. If it never held entries, move it away and start again; if it did, put a backup in its place.',
  )
}

async function refuseOtherMajor(database: string): Promise<void> {
  const major = (await readFile(join(database, 'PG_VERSION'), 'utf8')).trim()
  if (major === engineMajor) return
  throw new StartRefusal(
    `The database folder ${database} is of PostgreSQL ${major.slice(0, 20)}, and this version of Pullcord reads PostgreSQL ${engineMajor}. It was left as it is. ` +
      'Open it with the version of Pullcord that made it, write its entries out there, and read them into a new folder with this one.',
  )
}

async function refuseFullDisk(folder: string, needed: number): Promise<void> {
  const { bavail, bsize } = await statfs(folder)
  const free = bavail * bsize
  if (free < needed) throw new StartRefusal(toNoSpaceWords(folder, ` (${toMegabytes(free)} MB free, ${toMegabytes(needed)} MB needed)`))
}

function toForeignWords(folder: string): string {
  return (
    `The folder ${folder} is itself the database folder of a PostgreSQL server, not a data folder of Pullcord. It was left as it is. ` +
    'Name another folder with PULLCORD_DATA; to use a PostgreSQL server, name its address with DATABASE_URL.'
  )
}

function orNothing(error: NodeJS.ErrnoException): string[] {
  if (error.code === 'ENOENT') return []
  throw error
}

function toMegabytes(bytes: number): number {
  return Math.floor(bytes / (1024 * 1024))
}
