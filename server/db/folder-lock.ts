import { createHash } from 'node:crypto'
import { mkdir, readFile, realpath, rm, writeFile } from 'node:fs/promises'
import { createServer } from 'node:net'
import type { Server } from 'node:net'
import { join } from 'node:path'

import { z } from 'zod'

import { StartRefusal } from '#server/lib/start-refusal.ts'
import { takePidFile } from './pid-file.ts'

/** Proof that this process, and no other, may open what lies in the data folder. */
export type FolderHold = {
  /** The folder's real path. */
  readonly folder: string
  /** Ends the hold. It also ends with the process, however that dies. */
  readonly release: () => Promise<void>
}

/** Takes the lock itself, or answers null when somebody else has it. */
type TakeLock = (folder: string) => Promise<(() => Promise<void>) | null>

const holderFile = 'holder.json'
const holderSchema = z.object({ pid: z.number(), startedAt: z.string(), as: z.string() })

/**
 * Takes the data folder for this process, making it when it is not there; refuses in words when another process has it. Two
 * processes in one folder lose acknowledged rows without any error, so nothing may open the database without this.
 *
 * On Linux the lock is a socket in the abstract namespace, on Windows a named pipe: the kernel drops either with its process, so
 * that nothing is left to clean up after a kill. Elsewhere it is a file with process id and start time. What it can't see:
 * processes in another network namespace (a second container on the same volume) or on another machine.
 */
export async function holdFolder(path: string, as: string, take: TakeLock = takeLockOfThisSystem): Promise<FolderHold> {
  const folder = await makeFolder(path)
  const release = await take(folder)
  if (!release) throw new StartRefusal(await nameHolder(folder))
  try {
    const holder = { pid: process.pid, startedAt: new Date().toISOString(), as }
    await writeFile(join(folder, holderFile), `${JSON.stringify(holder)}\n`)
  } catch (error) {
    await release()
    throw toFolderRefusal(error, folder)
  }
  return {
    folder,
    release: async () => {
      await rm(join(folder, holderFile), { force: true })
      await release()
    },
  }
}

async function makeFolder(path: string): Promise<string> {
  try {
    await mkdir(path, { recursive: true, mode: 0o700 })
    return await realpath(path)
  } catch (error) {
    throw toFolderRefusal(error, path)
  }
}

async function takeLockOfThisSystem(folder: string): Promise<(() => Promise<void>) | null> {
  const name = `pullcord-${createHash('sha256').update(folder).digest('hex').slice(0, 32)}`
  if (process.platform === 'linux') return takeSocket(`\0${name}`)
  if (process.platform === 'win32') return takeSocket(`\\\\.\\pipe\\${name}`)
  return takePidFile(join(folder, 'lock'))
}

async function takeSocket(address: string): Promise<(() => Promise<void>) | null> {
  const server = createServer((socket) => socket.destroy())
  const isTaken = await new Promise<boolean>((resolve, reject) => {
    server.once('error', (error: NodeJS.ErrnoException) => (error.code === 'EADDRINUSE' ? resolve(false) : reject(error)))
    server.listen(address, () => resolve(true))
  })
  if (!isTaken) return null
  server.unref()
  return () => closeServer(server)
}

function closeServer(server: Server): Promise<void> {
  return new Promise((resolve) => server.close(() => resolve()))
}

async function nameHolder(folder: string): Promise<string> {
  const who = await readHolder(folder)
  return (
    `The data folder ${folder} is in use by ${who}. Only one process may open it at a time, or entries would be lost; nothing was changed. ` +
    'Stop that one first, or name another folder with PULLCORD_DATA.'
  )
}

async function readHolder(folder: string): Promise<string> {
  try {
    const { pid, startedAt, as } = holderSchema.parse(JSON.parse(await readFile(join(folder, holderFile), 'utf8')))
    return `the ${as} with process id ${pid}, started at ${startedAt}`
  } catch {
    // The holder has the lock and has not written its name yet: the refusal stands without it.
    return 'another process'
  }
}

/** Puts an error of the file system into words; anything else is a bug and comes back as it is. */
export function toFolderRefusal(error: unknown, folder: string): unknown {
  const code = error instanceof Error && 'code' in error ? String(error.code) : ''
  if (['EACCES', 'EPERM', 'EROFS'].includes(code)) {
    return new StartRefusal(
      `The data folder ${folder} can't be written to (${code}). Give this user the right to write there (chown or chmod), or name another folder with PULLCORD_DATA. Nothing was changed.`,
    )
  }
  if (code === 'ENOSPC' || code === 'EDQUOT') return new StartRefusal(toNoSpaceWords(folder))
  if (code === 'ENOTDIR' || code === 'EEXIST') {
    return new StartRefusal(`The data folder ${folder} is not a folder: a file has that name. Name another one with PULLCORD_DATA. Nothing was changed.`)
  }
  return error
}

/** What to say when the disk of the data folder is full. */
export function toNoSpaceWords(folder: string, needed = ''): string {
  return `The disk of the data folder ${folder} is full${needed}. Free some space there, or name a folder on another disk with PULLCORD_DATA. What is stored is safe.`
}
