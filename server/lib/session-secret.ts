import { randomBytes } from 'node:crypto'
import { chmod, link, mkdir, readFile, rm, stat, writeFile } from 'node:fs/promises'
import { join } from 'node:path'

import { StartRefusal } from './start-refusal.ts'

/**
 * The secret that names sign-ins, kept in the data folder and readable by this user alone; made when there is none. It is written
 * whole under a name of its own first, so that a second process, or the next start after a kill, never reads half of one.
 */
export async function keepSessionSecret(folder: string): Promise<string> {
  const path = join(folder, 'session-secret')
  const kept = await readFile(path, 'utf8').catch((error: NodeJS.ErrnoException) => {
    if (error.code === 'ENOENT') return null
    throw new StartRefusal(`The file ${path} can't be read (${error.code ?? error.message}). Give this user the right to read it, or name a secret with SESSION_SECRET.`)
  })
  if (kept === null) return makeSecret(folder, path)
  if (kept.trim().length < 32) {
    throw new StartRefusal(`The file ${path} holds no usable secret. It was left as it is. Delete it and a new one is made; everybody then signs in again.`)
  }
  const { mode } = await stat(path)
  if (process.platform !== 'win32' && (mode & 0o077) !== 0) await chmod(path, 0o600)
  return kept.trim()
}

async function makeSecret(folder: string, path: string): Promise<string> {
  await mkdir(folder, { recursive: true, mode: 0o700 })
  const draft = `${path}.${randomBytes(6).toString('hex')}`
  await writeFile(draft, `${randomBytes(48).toString('base64url')}\n`, { mode: 0o600, flush: true })
  // Of two processes that make one at once the first wins, and both read the winner's.
  await link(draft, path).catch((error: NodeJS.ErrnoException) => {
    if (error.code !== 'EEXIST') throw error
  })
  await rm(draft)
  return (await readFile(path, 'utf8')).trim()
}
