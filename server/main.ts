import { createServer } from 'node:http'
import type { Server } from 'node:http'
import { isIP } from 'node:net'
import { inspect } from 'node:util'

import type { Database } from './db/client.ts'
import { holdFolder } from './db/folder-lock.ts'
import type { FolderHold } from './db/folder-lock.ts'
import { openDatabase } from './db/open-database.ts'
import { parseEnvironment } from './lib/config.ts'
import type { Environment } from './lib/config.ts'
import type { Deps } from './lib/deps.ts'
import type { Log } from './lib/log.ts'
import { StartRefusal } from './lib/start-refusal.ts'
import type { OpenShop } from './open-shop.ts'

/** How long requests may take to end, and then the database to close, before the process ends all the same. */
const deadlineMs = { requests: 5_000, database: 8_000 }

const isDev = process.argv.includes('--dev')
const say = (words: string): void => void process.stdout.write(`${words}\n`)

type CreateApp = typeof import('./app.ts').createApp
type Running = { readonly server: Server; readonly database: Database; readonly hold: FolderHold | null; readonly log: Log }

/** What is running, or null when the start was refused; a signal that comes meanwhile waits for it. */
const started: Promise<Running | null> = start().catch((error: unknown) => {
  process.stderr.write(error instanceof StartRefusal ? `${error.message}\n` : `The start failed. ${inspect(error)}\n`)
  process.exitCode = 1
  return null
})

let isStopping = false
for (const signal of ['SIGTERM', 'SIGINT'] as const) {
  process.on(signal, () => {
    if (isStopping) process.exit(1) // Asked twice: at once. What was acknowledged is stored.
    isStopping = true
    void started.then((running) => running && stop(running, `Stopping (${signal})`, 0))
  })
}
const running = await started
if (running === null) process.exit()
void running.database.lost.then((error) => {
  if (isStopping) return
  isStopping = true
  running.log.fatal({ err: error }, 'the database stopped')
  return stop(running, 'The database stopped by itself. Everything that was acknowledged is stored; start again.', 1)
})

async function start(): Promise<Running> {
  const environment = readEnvironment()
  const { dataFolder, databaseUrl } = environment
  const hold = databaseUrl === null ? await holdFolder(dataFolder, 'server') : null
  try {
    // Whoever finds the folder taken hears so before anything that takes time is loaded; and that is loaded while the database opens.
    const opening = openDatabase(hold === null ? { databaseUrl: databaseUrl ?? '' } : { hold }, say)
    const [database, { openShop }, { createLog }, { createApp }] = await Promise.all([opening, import('./open-shop.ts'), import('./lib/log.ts'), import('./app.ts')])
    // At a terminal people read; elsewhere programs do, and want every request.
    const log = createLog({ level: process.stderr.isTTY ? 'warn' : 'info' })
    keepGoing(log)
    try {
      const shop = await openShop(database, environment, log)
      await loadDemoWhenNew(shop)
      const server = await serve(shop.deps, environment, createApp)
      await welcome(shop.deps, server)
      return { server, database, hold, log }
    } catch (error) {
      await database.close()
      throw error
    }
  } catch (error) {
    await hold?.release()
    throw error
  }
}

/** The last resort: an error that nobody handled is written down, and the shop goes on. */
function keepGoing(log: Log): void {
  process.on('unhandledRejection', (error) => log.error({ err: error }, 'a promise was rejected and nobody looked'))
  process.on('uncaughtException', (error) => log.error({ err: error }, 'an error that nobody caught'))
}

function readEnvironment(): Environment {
  const read = parseEnvironment(process.env)
  if (read.ok) return read.value
  throw new StartRefusal(['The environment has wrong values; nothing was changed.', ...read.error.map((fault) => `- ${fault}`)].join('\n'))
}

async function loadDemoWhenNew({ deps, isUntouched }: OpenShop): Promise<void> {
  if (!deps.config.demo || !isUntouched) return
  say('Loading the demo shop')
  const { loadDemo } = await import('#seeds-demo/load-demo.ts')
  await loadDemo(deps)
}

async function serve(deps: Deps, { host, port }: Environment, createApp: CreateApp): Promise<Server> {
  const server = createServer()
  const devPages = isDev ? await (await import('./dev-pages.ts')).createDevPages(server) : null
  server.on('request', createApp(deps, devPages === null ? {} : { devPages }))
  await new Promise<void>((resolve, reject) => {
    server.once('error', (error) => reject(toListenRefusal(error, host, port)))
    server.listen(port, host, resolve)
  })
  return server
}

function toListenRefusal(error: NodeJS.ErrnoException, host: string, port: number): unknown {
  if (error.code === 'EADDRINUSE') return new StartRefusal(`Port ${port} on ${host} is in use by another program. Stop that one, or name another port, for example PORT=${port + 1}`)
  if (error.code === 'EACCES') return new StartRefusal(`This user may not listen on port ${port}. Name one from 1024 up, for example PORT=3000.`)
  if (error.code === 'EADDRNOTAVAIL' || error.code === 'ENOTFOUND') return new StartRefusal(`This machine has no address ${host}. Correct HOST; 0.0.0.0 means all that it has.`)
  return error
}

/** Says where the shop is and how to get in. */
async function welcome(deps: Deps, server: Server): Promise<void> {
  const { config } = deps
  say(`\nPullcord is ready at ${toOpenAddress(server, config.publicUrl)}`)
  if (config.demo && !config.isProduction) {
    const { demoSignIns } = await import('./services/demo-sign-ins.ts')
    say('This is the demo shop. Sign in as')
    for (const { role, name, email, password } of demoSignIns) say(`  ${role.padEnd(7)} ${name.padEnd(16)} ${email.padEnd(28)} ${password}`)
    say('A shop of your own: PULLCORD_DATA=./shop DEMO=0 npm start')
  } else {
    const { makeOwnerCode } = await import('./services/first-owner.ts')
    const owner = await makeOwnerCode(deps)
    if (owner) say(`This shop has no owner yet. Open the address above and enter this code, good once, until ${owner.expiresAt.toLocaleString('en-GB', { dateStyle: 'medium', timeStyle: 'short' })}:\n  ${owner.code}`)
  }
  if (config.publicUrl.startsWith('http:') && !isLoopback(config.host)) say('Other devices reach this over plain http: entries and passwords can be read on the way. Use it in a network that you trust.')
  say('Ctrl-C stops it.')
}

/** The address to open; with PORT=0 the system has picked the port only now. */
function toOpenAddress(server: Server, publicUrl: string): string {
  const url = new URL(publicUrl)
  const address = server.address()
  if (url.port === '0' && address !== null && typeof address === 'object') url.port = String(address.port)
  return url.origin
}

function isLoopback(host: string): boolean {
  return host === 'localhost' || host === '::1' || (isIP(host) === 4 && host.startsWith('127.'))
}

/** Takes no more requests, lets those under way end, closes the database, lets go of the folder. */
async function stop({ server, database, hold }: Running, words: string, status: number): Promise<void> {
  say(words)
  const timer = setTimeout(() => server.closeAllConnections(), deadlineMs.requests)
  await new Promise<void>((resolve) => {
    server.close(() => resolve())
    server.closeIdleConnections()
  })
  clearTimeout(timer)
  await database.close(deadlineMs.database)
  await hold?.release()
  if (status === 0) say('Stopped. Everything is stored.')
  process.exit(status)
}
