import { closeSync, fdatasyncSync, fsyncSync, openSync, readdirSync } from 'node:fs'
import { open } from 'node:fs/promises'
import { dirname, join } from 'node:path'

import { NodeFS } from '@electric-sql/pglite/nodefs'

/** The parts of the engine's file layer (Emscripten's NODEFS) that are used here; the engine's version is pinned exactly. */
type OpenFile = { readonly node: object; readonly nfd: number }
type FileLayer = {
  readonly realPath: (node: object) => string
  readonly tryFSOperation: <T>(act: () => T) => T
  readonly stream_ops: {
    write: (file: OpenFile, buffer: Uint8Array, offset: number, length: number, position: number) => number
    fsync?: (file: OpenFile) => number
  }
}
type Mode = { preRun?: ((module: { readonly NODEFS: FileLayer }) => void)[] }

/**
 * The engine's folder on disk, with the step that the engine leaves out: on Node its `fsync` does nothing at all, so a commit is
 * safe from the death of the process and not from a power cut. Here PostgreSQL runs with `fsync=on` and its own requests reach the
 * disk at the moments at which PostgreSQL makes them, data files before the checkpoint record included, with one change: a request for a
 * file of the write-ahead log is only noted, and `settled()` carries it out before the commit is acknowledged, once for all commits
 * that wait. That keeps PostgreSQL's order (log before data), because nothing else is written or synced while a request is open.
 *
 * Not proven against a real power cut: no test here can pull the plug, and a disk that lies about `fsync` undoes all of it.
 */
export class DurableFs extends NodeFS {
  /** Bytes written to the write-ahead log since this was last set to zero; decides when a checkpoint is worth it. */
  walBytes = 0
  readonly #noted = new Set<string>()
  #inFlight: readonly string[] = []
  #running: Promise<void> | null = null
  #next: Promise<void> | null = null
  readonly #fail: (error: Error) => void

  /** `fail` is called when the log can't be synced any more: what was written since is not safe, so the engine must stop. */
  constructor(folder: string, fail: (error: Error) => void) {
    super(folder)
    this.#fail = fail
  }

  override async init(...[engine, options]: Parameters<NodeFS['init']>): ReturnType<NodeFS['init']> {
    const made = await super.init(engine, options)
    // The engine's own type of these options knows nothing of the file layer that it hands to `preRun`.
    const mode = made.emscriptenOpts as Mode
    mode.preRun = [...(mode.preRun ?? []), ({ NODEFS }) => this.#install(NODEFS)]
    return made
  }

  /**
   * Resolves when every commit made until now is on the disk. A commit that is no longer noted is in the run that is under way;
   * one that still is waits for the next run, together with all others that are noted by then.
   */
  settled(): Promise<void> {
    if (this.#noted.size === 0) return this.#running ?? Promise.resolve()
    this.#next ??= (this.#running ?? Promise.resolve()).then(() => {
      this.#next = null
      this.#running = this.#syncNoted()
      return this.#running
    })
    return this.#next
  }

  #install(layer: FileLayer): void {
    const { write } = layer.stream_ops
    const logFiles = new WeakMap<object, string | null>()
    const findLogPath = (file: OpenFile): string | null => {
      const known = logFiles.get(file)
      if (known !== undefined) return known
      const path = layer.realPath(file.node)
      const found = /[\\/]pg_wal[\\/][0-9A-F]{24}$/.test(path) ? path : null
      logFiles.set(file, found)
      return found
    }
    layer.stream_ops.write = (file, buffer, offset, length, position) => {
      if (findLogPath(file) !== null) this.walBytes += length
      else layer.tryFSOperation(() => this.#settleNow())
      return write(file, buffer, offset, length, position)
    }
    layer.stream_ops.fsync = (file) => {
      const logPath = findLogPath(file)
      if (logPath !== null) {
        this.#noted.add(logPath)
        return 0
      }
      layer.tryFSOperation(() => {
        this.#settleNow()
        fsyncSync(file.nfd)
      })
      return 0
    }
  }

  async #syncNoted(): Promise<void> {
    this.#inFlight = [...this.#noted]
    this.#noted.clear()
    try {
      await Promise.all(this.#inFlight.map(syncLogFile))
    } catch (error) {
      this.#fail(error instanceof Error ? error : new Error(String(error)))
      throw error
    } finally {
      this.#inFlight = []
      this.#running = null
    }
  }

  /** Syncs at once what is noted or under way: something that must not reach the disk before the log is about to be written. */
  #settleNow(): void {
    if (this.#noted.size === 0 && this.#inFlight.length === 0) return
    const paths = new Set([...this.#noted, ...this.#inFlight])
    this.#noted.clear()
    this.#inFlight = []
    for (const path of paths) {
      const descriptor = openSync(path, 'r+')
      try {
        fdatasyncSync(descriptor)
      } finally {
        closeSync(descriptor)
      }
    }
  }
}

async function syncLogFile(path: string): Promise<void> {
  const file = await open(path, 'r+')
  try {
    await file.datasync()
  } finally {
    await file.close()
  }
}

/** Syncs a folder that was just made, with everything in it: what made it did not, and from then on the engine relies on it. */
export function syncTree(folder: string): void {
  for (const entry of readdirSync(folder, { withFileTypes: true, recursive: true })) {
    if (entry.isFile() || entry.isDirectory()) syncPath(join(entry.parentPath, entry.name))
  }
  syncPath(folder)
  syncPath(dirname(folder))
}

function syncPath(path: string): void {
  const descriptor = openSync(path, 'r')
  try {
    fsyncSync(descriptor)
  } finally {
    closeSync(descriptor)
  }
}
