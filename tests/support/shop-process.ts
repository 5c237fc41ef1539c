import { spawn } from 'node:child_process'
import type { ChildProcess } from 'node:child_process'
import { cp, mkdtemp, rm } from 'node:fs/promises'
import { createServer } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'

const root = fileURLToPath(new URL('../..', import.meta.url))

type Running = { readonly child: ChildProcess; readonly ended: Promise<number | null>; readonly url: string; readonly words: string }

/** A shop's server as a process of its own, on a data folder of its own, until it is closed. */
export class ShopProcess {
  readonly dataFolder: string
  readonly #environment: Readonly<Record<string, string>>
  #running: Running | null = null
  #url = ''
  /** What every server on this folder wrote for programs to read. */
  #log = ''

  private constructor(dataFolder: string, environment: Readonly<Record<string, string>>) {
    this.dataFolder = dataFolder
    this.#environment = environment
  }

  /** Starts one on a new folder: a copy of `prepared`, or an empty one that becomes what the environment says. */
  static async open({ prepared, environment = {} }: { readonly prepared?: string; readonly environment?: Readonly<Record<string, string>> } = {}): Promise<ShopProcess> {
    const folder = await mkdtemp(join(tmpdir(), 'pullcord-shop-'))
    if (prepared !== undefined) await cp(prepared, folder, { recursive: true })
    const shop = new ShopProcess(folder, environment)
    await shop.start()
    return shop
  }

  /** The same for as long as the shop lives, restarts included. */
  get url(): string {
    return this.#url
  }

  /** What the last start printed for people. */
  get words(): string {
    return this.#running?.words ?? ''
  }

  get isRunning(): boolean {
    return this.#running !== null
  }

  /** Starts the server, after the first time on the port that it had; resolves once it says that it is ready. */
  async start(): Promise<void> {
    const { PATH = '', HOME = '' } = process.env
    const port = this.#url === '' ? String(await findFreePort()) : new URL(this.#url).port
    const child = spawn(process.execPath, ['--import', 'tsx', 'server/main.ts'], {
      cwd: root,
      env: { PATH, HOME, PORT: port, PULLCORD_DATA: this.dataFolder, ...this.#environment },
      stdio: ['ignore', 'pipe', 'pipe'],
    })
    // Should the tests end without closing it, it goes with them.
    const killNow = (): void => void child.kill('SIGKILL')
    process.once('exit', killNow)
    const ended = new Promise<number | null>((resolve) => child.once('close', resolve))
    void ended.then(() => process.off('exit', killNow))
    child.stderr.setEncoding('utf8').on('data', (chunk: string) => (this.#log += chunk))
    let words = ''
    const url = await new Promise<string>((resolve, reject) => {
      child.stdout.setEncoding('utf8').on('data', (chunk: string) => {
        words += chunk
        const ready = /ready at (\S+)[\s\S]*Ctrl-C/.exec(words)?.[1]
        if (ready !== undefined) resolve(ready)
      })
      void ended.then((status) => reject(new Error(`The server ended with status ${status}: ${words}${this.#log}`)))
    })
    this.#url = url
    this.#running = { child, ended, url, words }
  }

  /** Stops it as Ctrl-C does. */
  async stop(): Promise<void> {
    const status = await this.#end('SIGTERM')
    if (status !== 0 && status !== undefined) throw new Error(`The server stopped with status ${status}: ${this.#log}`)
  }

  /** Takes its life without a warning, as a power cut does. */
  async kill(): Promise<void> {
    await this.#end('SIGKILL')
  }

  /** Stops it for good and removes its folder. */
  async close(): Promise<void> {
    await this.stop()
    await rm(this.dataFolder, { recursive: true, force: true })
  }

  /** Lines of the log that tell of a fault of the server's own: an answer of 500, a rejection that nobody looked at. */
  listFaults(): readonly string[] {
    return this.#log.split('\n').filter((line) => /"level":"(error|fatal)"|"status(Code)?":5\d\d/.test(line) || (line !== '' && !line.startsWith('{')))
  }

  async #end(signal: 'SIGTERM' | 'SIGKILL'): Promise<number | null | undefined> {
    const running = this.#running
    if (running === null) return undefined
    this.#running = null
    running.child.kill(signal)
    return running.ended
  }
}

/** Links that the shop hands out name its port, so it is settled before the start. */
function findFreePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const probe = createServer()
    probe.once('error', reject)
    probe.listen(0, '127.0.0.1', () => {
      const address = probe.address()
      probe.close(() => (address !== null && typeof address === 'object' ? resolve(address.port) : reject(new Error('No port is free.'))))
    })
  })
}
