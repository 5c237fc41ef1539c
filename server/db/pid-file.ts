import { execFile } from 'node:child_process'
import { link, readFile, rename, rm, writeFile } from 'node:fs/promises'
import { promisify } from 'node:util'

const run = promisify(execFile)

/**
 * The lock for systems that have no socket that dies with its process: a file with process id and start time, made by `link`, which
 * fails when it is there. A file whose process is gone, or whose id now belongs to a process of another start time, is taken over.
 */
export async function takePidFile(path: string, pid = process.pid): Promise<(() => Promise<void>) | null> {
  const mine = `${pid} ${(await readStartTime(pid)) ?? 'unknown'}\n`
  const draft = `${path}.${pid}`
  await writeFile(draft, mine)
  try {
    for (let tries = 0; tries < 3; tries += 1) {
      if (await linkNew(draft, path)) return () => rm(path, { force: true })
      const theirs = await readFile(path, 'utf8').catch(() => null)
      if (theirs === null) continue
      if (await isAlive(theirs)) return null
      await setStaleAside(path, theirs, `${draft}.stale`)
    }
    return null
  } finally {
    await rm(draft, { force: true })
  }
}

async function linkNew(draft: string, path: string): Promise<boolean> {
  try {
    await link(draft, path)
    return true
  } catch (error) {
    if (error instanceof Error && 'code' in error && error.code === 'EEXIST') return false
    throw error
  }
}

/** Moves a stale file away; when another opener was quicker and the file moved is a live one, it is put back. */
async function setStaleAside(path: string, expected: string, aside: string): Promise<void> {
  try {
    await rename(path, aside)
  } catch {
    return // Another opener has moved it: the next try sees what it left.
  }
  if ((await readFile(aside, 'utf8')) !== expected) await linkNew(aside, path)
  await rm(aside, { force: true })
}

async function isAlive(content: string): Promise<boolean> {
  const [, pid, startTime] = /^(\d+) (.*)\n$/.exec(content) ?? []
  if (pid === undefined) return false
  const now = await readStartTime(Number(pid))
  return now !== null && now === startTime
}

/** When a process started, in the words of `ps`, or null when there is no such process. */
async function readStartTime(pid: number): Promise<string | null> {
  try {
    const { stdout } = await run('ps', ['-o', 'lstart=', '-p', String(pid)], { env: { ...process.env, LC_ALL: 'C', TZ: 'UTC' } })
    return stdout.trim() || null
  } catch (error) {
    // `ps` answers 1 for a process that is not there; that it can't be run at all is another matter.
    if (error instanceof Error && 'code' in error && error.code === 1) return null
    throw error
  }
}
