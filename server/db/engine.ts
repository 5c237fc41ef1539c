import { existsSync } from 'node:fs'
import { join } from 'node:path'

import { PGlite, types } from '@electric-sql/pglite'
import type { Transaction } from '@electric-sql/pglite'
import { pg_trgm } from '@electric-sql/pglite/contrib/pg_trgm'
import { unaccent } from '@electric-sql/pglite/contrib/unaccent'

import { defer } from './deferred.ts'
import { DurableFs, syncTree } from './durable-fs.ts'
import type { EngineFault, EngineRequest, EngineStart } from './engine-messages.ts'

/** An engine that answers requests; they may be handed to it without waiting for earlier ones. */
export type Engine = { readonly handle: (request: EngineRequest) => Promise<unknown> }

/** Moments, intervals and their arrays cross as text: the query builder reads them itself, and its own parsers can't cross to a worker. */
const asText = (value: string): string => value
const parsers = Object.fromEntries([types.TIMESTAMP, types.TIMESTAMPTZ, types.INTERVAL, types.DATE, 1231, 1115, 1185, 1187, 1182].map((type) => [type, asText]))

/** A checkpoint comes even to a server that is never idle, before the log to read after a crash grows past this. */
const mostWalBytes = 128 * 1024 * 1024

/** Opens the engine; `fail` is called when it can't go on by itself. */
export async function openEngine(start: EngineStart, fail: (error: Error) => void): Promise<Engine> {
  const disk = start.folder === null ? null : new DurableFs(start.folder, fail)
  const isNew = start.folder !== null && !existsSync(join(start.folder, 'PG_VERSION'))
  const pg = new PGlite({
    extensions: { pg_trgm, unaccent },
    ...(disk === null ? {} : { fs: disk, startParams: [...PGlite.defaultStartParams.filter((flag) => flag !== '-F'), '-c', 'wal_sync_method=fsync'] }),
    ...(start.image === null ? {} : { loadDataDir: new Blob([start.image]) }),
  })
  await pg.waitReady
  if (isNew && start.folder !== null) syncTree(start.folder)
  return serve(pg, disk, start.checkpointAfterMs)
}

type OpenTransaction = {
  readonly started: Promise<Transaction>
  /** Settles when the transaction is over on the engine's side. */
  readonly done: Promise<unknown>
  readonly end: (how: 'commit' | 'rollback') => void
}
class RolledBack extends Error {}

function serve(pg: PGlite, disk: DurableFs | null, checkpointAfterMs: number): Engine {
  const transactions = new Map<number, OpenTransaction>()
  let idleTimer: NodeJS.Timeout | undefined

  // An answer waits until every commit before it is on the disk, reads included: one may have seen a row that a power cut would take
  // back, and whoever is told "we have that already" throws the only other copy away.
  const answer = async (request: EngineRequest): Promise<unknown> => {
    switch (request.kind) {
      case 'query': {
        const client = request.transaction === null ? pg : await find(request.transaction).started
        const { rows, rowCount } = await client.query(request.sql, [...request.params], { rowMode: request.rowMode, parsers })
        // Inside a transaction nothing is promised before its end.
        if (request.transaction === null) await disk?.settled()
        return { rows, rowCount: rowCount ?? null }
      }
      case 'begin':
        transactions.set(request.transaction, begin(pg))
        await find(request.transaction).started
        return null
      case 'commit':
      case 'rollback': {
        const transaction = find(request.transaction)
        transactions.delete(request.transaction)
        transaction.end(request.kind)
        await transaction.done
        await disk?.settled()
        return null
      }
      case 'image':
        return new Uint8Array(await (await pg.dumpDataDir('none')).arrayBuffer())
      case 'close':
        clearTimeout(idleTimer)
        await pg.close()
        return null
    }
  }

  const find = (number: number): OpenTransaction => {
    const transaction = transactions.get(number)
    if (!transaction) throw new Error('This transaction is over.')
    return transaction
  }

  /** The engine has no background work of its own: what its checkpointer and autovacuum would do is done when nobody waits. */
  const tidy = async (): Promise<void> => {
    if (disk === null || disk.walBytes === 0 || transactions.size > 0) return
    await pg.exec('vacuum (analyze)')
    await pg.exec('checkpoint')
    await disk.settled()
    disk.walBytes = 0
  }
  const tidyLater = (): void => {
    clearTimeout(idleTimer)
    if (disk === null || pg.closed) return
    const wait = disk.walBytes > mostWalBytes ? 0 : checkpointAfterMs
    idleTimer = setTimeout(() => void tidy().catch(() => tidyLater()), wait)
  }

  return {
    handle: async (request) => {
      try {
        return await answer(request)
      } finally {
        tidyLater()
      }
    },
  }
}

/** Holds a transaction of the engine open until it is told how to end it. */
function begin(pg: PGlite): OpenTransaction {
  const start = defer<Transaction>()
  const finish = defer<void>()
  const done = pg
    .transaction((tx) => {
      start.resolve(tx)
      return finish.promise
    })
    .catch((error: unknown) => {
      start.reject(error)
      if (!(error instanceof RolledBack)) throw error
    })
  // Whoever asked for the commit hears of a failure; one before that has already been told by `started`.
  done.catch(() => undefined)
  start.promise.catch(() => undefined)
  return { started: start.promise, done, end: (how) => (how === 'commit' ? finish.resolve() : finish.reject(new RolledBack())) }
}

/** Takes from an error what may cross to the main thread. */
export function toFault(error: unknown): EngineFault {
  if (!(error instanceof Error)) return { message: String(error) }
  const fields = ['code', 'detail', 'constraint', 'table', 'column'] as const
  const given = fields.flatMap((field) => {
    const value: unknown = Reflect.get(error, field)
    return typeof value === 'string' ? [[field, value] as const] : []
  })
  return { message: error.message, ...Object.fromEntries(given) }
}
