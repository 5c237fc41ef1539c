import { execFile } from 'node:child_process'
import { randomBytes } from 'node:crypto'
import { link, readdir, readFile, rm, writeFile } from 'node:fs/promises'
import { basename, dirname, join } from 'node:path'
import { promisify } from 'node:util'

const run = promisify(execFile)

/**
 * The lock for systems that have no socket that dies with its process: numbered files, of which the highest says who has it (process id
 * and start time) or that it is free. Whoever finds the highest one dead or free makes the next, by `link`, which fails for all but
 * one; the highest is never removed, so nobody can take from under another what both have found stale.
 */
export async function takePidFile(path: string): Promise<(() => Promise<void>) | null> {
  const mine = `${process.pid} ${(await readStartTime(process.pid)) ?? 'unknown'}\n`
  for (;;) {
    const highest = await findHighest(path)
    if (highest > 0 && (await isAlive(await readFile(`${path}.${highest}`, 'utf8').catch(() => 'gone')))) return null
    const number = highest + 1
    if (!(await putNew(`${path}.${number}`, mine))) continue
    if ((await findHighest(path)) > number) {
      // What was found was old already: the true highest is another's to judge, in the next round.
      await rm(`${path}.${number}`)
      continue
    }
    await removeBelow(path, number)
    return async () => void (await putNew(`${path}.${number + 1}`, 'free\n'))
  }
}

async function listNumbers(path: string): Promise<number[]> {
  const prefix = `${basename(path)}.`
  const names = await readdir(dirname(path))
  return names.filter((name) => name.startsWith(prefix) && /^\d+$/.test(name.slice(prefix.length))).map((name) => Number(name.slice(prefix.length)))
}

async function findHighest(path: string): Promise<number> {
  return Math.max(0, ...(await listNumbers(path)))
}

async function removeBelow(path: string, number: number): Promise<void> {
  for (const other of await listNumbers(path)) if (other < number) await rm(`${path}.${other}`, { force: true })
}

/** Makes a file with its content in one step; false when it is there already. */
async function putNew(path: string, content: string): Promise<boolean> {
  const draft = join(dirname(path), `draft-${randomBytes(8).toString('hex')}`)
  await writeFile(draft, content)
  try {
    await link(draft, path)
    return true
  } catch (error) {
    if (error instanceof Error && 'code' in error && error.code === 'EEXIST') return false
    throw error
  } finally {
    await rm(draft)
  }
}

async function isAlive(content: string): Promise<boolean> {
  const [, pid, startTime] = /^(\d+) (.*)\n$/.exec(content) ?? []
  return pid !== undefined && (await readStartTime(Number(pid))) === startTime
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
