import { spawn } from 'node:child_process'
import type { ChildProcess } from 'node:child_process'
import { cp, mkdtemp, rm } from 'node:fs/promises'
import { createServer } from 'node:net'
import type { Server } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'

import { afterAll, onTestFinished } from 'vitest'

const root = fileURLToPath(new URL('../..', import.meta.url))

export type Environment = Readonly<Record<string, string>>
type Outcome = { readonly status: number | null; readonly stdout: string; readonly stderr: string; readonly ms: number }
type User = { readonly uid: number; readonly gid: number }

/** A folder of a test's own that goes when the test is over. */
export async function makeFolder(): Promise<string> {
  const folder = await mkdtemp(join(tmpdir(), 'pullcord-process-'))
  onTestFinished(() => rm(folder, { recursive: true, force: true }))
  return folder
}

const made = new Map<'demo' | 'own', Promise<string>>()

/** A data folder in which a server has run before: the demo shop, or a shop of one's own that has no owner yet. Made once, then copied. */
export async function makeUsedFolder(kind: 'demo' | 'own'): Promise<string> {
  const original = made.get(kind) ?? runOnce(kind)
  made.set(kind, original)
  const folder = await makeFolder()
  await cp(await original, folder, { recursive: true })
  return folder
}

afterAll(async () => {
  for (const folder of made.values()) await rm(await folder, { recursive: true, force: true })
})

async function runOnce(kind: 'demo' | 'own'): Promise<string> {
  const folder = await mkdtemp(join(tmpdir(), 'pullcord-used-'))
  const server = await startServer({ PULLCORD_DATA: folder, DEMO: kind === 'demo' ? '1' : '0' })
  const status = await server.end('SIGTERM')
  if (status !== 0) throw new Error(`The server ended with status ${status}.`)
  return folder
}

/** Starts one of the project's own programs, as `npm start` and `npm run cli` do. What the tests' environment says of Pullcord stays out. */
function launch(args: readonly string[], environment: Environment, user?: User): ChildProcess {
  const { PATH = '', HOME = '' } = process.env
  return spawn(process.execPath, ['--import', 'tsx', ...args], { cwd: root, env: { PATH, HOME, ...environment }, stdio: ['ignore', 'pipe', 'pipe'], ...user })
}

/** Runs a program to its end. */
export async function runToEnd(args: readonly string[], environment: Environment, user?: User): Promise<Outcome> {
  const startedAt = performance.now()
  const child = launch(args, environment, user)
  const [stdout, stderr] = [collect(child.stdout), collect(child.stderr)]
  const status = await new Promise<number | null>((resolve) => child.once('close', resolve))
  return { status, stdout: stdout(), stderr: stderr(), ms: performance.now() - startedAt }
}

/** A server that has said that it is ready. */
export type RunningServer = {
  readonly url: string
  readonly pid: number
  readonly stdout: () => string
  /** Sends a signal and answers the exit status, or null when the signal itself ended it. */
  readonly end: (signal: 'SIGKILL' | 'SIGTERM' | 'SIGINT') => Promise<number | null>
}

/** Starts the server on a free port and waits until it is ready. */
export async function startServer(environment: Environment): Promise<RunningServer> {
  const child = launch(['server/main.ts'], { PORT: '0', ...environment })
  const ended = new Promise<number | null>((resolve) => child.once('close', resolve))
  const end = async (signal: 'SIGKILL' | 'SIGTERM' | 'SIGINT'): Promise<number | null> => {
    child.kill(signal)
    return ended
  }
  onTestFinished(async () => void (await end('SIGKILL')))
  const [stdout, stderr] = [collect(child.stdout), collect(child.stderr)]
  const url = await new Promise<string>((resolve, reject) => {
    child.stdout?.on('data', () => {
      const ready = /ready at (\S+)[\s\S]*Ctrl-C/.exec(stdout())
      if (ready?.[1]) resolve(ready[1])
    })
    void ended.then((status) => reject(new Error(`The server ended with status ${status}: ${stdout()}${stderr()}`)))
  })
  return { url, pid: child.pid ?? 0, stdout, end }
}

function collect(stream: ChildProcess['stdout']): () => string {
  let text = ''
  stream?.setEncoding('utf8').on('data', (chunk: string) => (text += chunk))
  return () => text
}

/** Occupies a port as another program would. */
export async function occupyPort(): Promise<number> {
  const server: Server = createServer()
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  onTestFinished(() => new Promise<void>((resolve) => server.close(() => resolve())))
  const address = server.address()
  if (address === null || typeof address === 'string') throw new Error('No port.')
  return address.port
}
