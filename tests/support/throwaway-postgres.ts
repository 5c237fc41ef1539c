import { execFile, spawn } from 'node:child_process'
import { chown, mkdtemp, readdir, readFile, rm } from 'node:fs/promises'
import { createServer } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { promisify } from 'node:util'

import pg from 'pg'

const run = promisify(execFile)
const debianFolder = '/usr/lib/postgresql'

/** A PostgreSQL server of the tests' own, on the loopback address, with everything in a folder that goes when it stops. */
export type ThrowawayPostgres = { readonly url: string; readonly stop: () => Promise<void> }

/** Starts one with Debian's programs. PostgreSQL refuses to run as root, so for root it runs as Debian's user `postgres`. */
export async function startThrowawayPostgres(): Promise<ThrowawayPostgres> {
  const programs = await findPrograms()
  const user = process.getuid?.() === 0 ? await findPostgresUser() : null
  const folder = await mkdtemp(join(tmpdir(), 'pullcord-postgres-'))
  if (user !== null) await chown(folder, user.uid, user.gid)
  const data = join(folder, 'data')
  await run(join(programs, 'initdb'), ['-D', data, '-U', 'pullcord', '-A', 'trust', '-E', 'UTF8', '--locale=C.UTF-8', '--no-sync'], { ...user, cwd: folder })
  const port = await findFreePort()
  const settings = ['listen_addresses=127.0.0.1', `port=${port}`, `unix_socket_directories=${folder}`, 'fsync=off', 'max_connections=200', 'log_min_messages=fatal']
  const server = spawn(join(programs, 'postgres'), ['-D', data, ...settings.flatMap((setting) => ['-c', setting])], { ...user, cwd: folder, stdio: ['ignore', 'ignore', 'inherit'] })
  const ended = new Promise<void>((resolve) => server.once('exit', () => resolve()))
  // Should the tests end without stopping it, it goes with them.
  const killNow = (): void => void server.kill('SIGQUIT')
  process.once('exit', killNow)
  const url = `postgresql://pullcord@127.0.0.1:${port}/postgres`
  await waitUntilReady(url)
  return {
    url,
    stop: async () => {
      process.off('exit', killNow)
      server.kill('SIGQUIT')
      await ended
      await rm(folder, { recursive: true, force: true })
    },
  }
}

async function findPrograms(): Promise<string> {
  const versions = await readdir(debianFolder).catch((): string[] => [])
  const newest = versions.sort((a, b) => Number(a) - Number(b)).at(-1)
  if (newest === undefined) throw new Error('The tests need PostgreSQL: apt-get install --no-install-recommends postgresql')
  return join(debianFolder, newest, 'bin')
}

async function findPostgresUser(): Promise<{ uid: number; gid: number }> {
  const line = (await readFile('/etc/passwd', 'utf8')).split('\n').find((text) => text.startsWith('postgres:'))
  const [, , uid, gid] = line?.split(':') ?? []
  if (uid === undefined || gid === undefined) throw new Error('The tests need the user postgres, which comes with the package postgresql.')
  return { uid: Number(uid), gid: Number(gid) }
}

function findFreePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const probe = createServer()
    probe.once('error', reject)
    probe.listen(0, '127.0.0.1', () => {
      const address = probe.address()
      probe.close(() => (address !== null && typeof address === 'object' ? resolve(address.port) : reject(new Error('No free port.'))))
    })
  })
}

async function waitUntilReady(url: string): Promise<void> {
  const deadline = Date.now() + 20_000
  for (;;) {
    const client = new pg.Client({ connectionString: url })
    try {
      await client.connect()
      return
    } catch (error) {
      if (Date.now() > deadline) throw error
      await new Promise((resolve) => setTimeout(resolve, 50))
    } finally {
      await client.end().catch(() => undefined)
    }
  }
}
