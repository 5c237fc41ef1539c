import { startWorker } from '#server/lib/start-worker.ts'
import type { EngineAnswer } from './client.ts'
import { defer } from './deferred.ts'
import type { Deferred } from './deferred.ts'
import type { EngineFault, EngineOrder, EngineReply, EngineStart } from './engine-messages.ts'

/** An error of the engine, with the fields by which code tells one refusal from another; the SQLSTATE is `code` on both engines. */
export class EngineError extends Error {
  override readonly name = 'EngineError'
  constructor({ message, ...fields }: EngineFault) {
    super(message)
    Object.assign(this, fields)
  }
}

type QueryOptions = { readonly rowMode?: 'array' | 'object' }
type Query = (sql: string, params?: readonly unknown[], options?: QueryOptions) => Promise<EngineAnswer<unknown>>

/** The engine in its worker, in the shape that the query builder's driver calls. */
export type EngineClient = {
  readonly query: Query
  readonly transaction: <T>(act: (client: { readonly query: Query }) => Promise<T>) => Promise<T>
  /** The whole database as one file, for tests that begin with it. */
  readonly image: () => Promise<Uint8Array<ArrayBuffer>>
  readonly close: (deadlineMs: number) => Promise<void>
  readonly lost: Promise<Error>
}

const enginePackages = ['@electric-sql/pglite', '@electric-sql/pglite/contrib/pg_trgm', '@electric-sql/pglite/contrib/unaccent']

/** Starts the worker and waits until its engine is open; rejects with the engine's own words when it can't be opened. */
export async function startEngine(start: EngineStart): Promise<EngineClient> {
  const worker = startWorker(new URL('./engine-worker.ts', import.meta.url), start, enginePackages)
  const waiting = new Map<number, Deferred<unknown>>()
  const lost = defer<Error>()
  let fate: Error | null = null
  let lastNumber = 0

  const giveUp = (error: Error): void => {
    if (fate !== null) return
    fate = error
    for (const waiter of waiting.values()) waiter.reject(error)
    waiting.clear()
    lost.resolve(error)
    void worker.terminate()
  }
  worker.on('error', (error: Error) => giveUp(error))
  worker.on('exit', (code) => giveUp(new Error(`The database engine stopped with status ${code}.`)))
  worker.on('message', (message: EngineReply) => {
    if (message.id === null) return giveUp(new EngineError(message.fault))
    const waiter = waiting.get(message.id)
    waiting.delete(message.id)
    if (message.ok) waiter?.resolve(message.value)
    else waiter?.reject(new EngineError(message.fault))
  })

  const expect = (id: number): Promise<unknown> => {
    const waiter = defer<unknown>()
    waiting.set(id, waiter)
    return waiter.promise
  }
  const send = (order: EngineOrder): Promise<unknown> => {
    if (fate !== null) return Promise.reject(fate)
    lastNumber += 1
    const answer = expect(lastNumber)
    worker.postMessage({ ...order, id: lastNumber })
    return answer
  }
  const queryIn =
    (transaction: number | null): Query =>
    async (sql, params = [], { rowMode = 'object' } = {}) =>
      // The worker answers a query with rows and a count, and with nothing else.
      (await send({ kind: 'query', transaction, sql, params, rowMode })) as EngineAnswer<unknown>

  await expect(0)
  return {
    query: queryIn(null),
    transaction: async (act) => {
      const transaction = (lastNumber += 1)
      const begun = send({ kind: 'begin', transaction })
      begun.catch(() => undefined) // Its first statement fails with the same error.
      try {
        const result = await act({ query: queryIn(transaction) })
        await begun
        await send({ kind: 'commit', transaction })
        return result
      } catch (error) {
        await send({ kind: 'rollback', transaction }).catch(() => undefined) // After a failed commit there is nothing to roll back.
        throw error
      }
    },
    image: async () => (await send({ kind: 'image' })) as Uint8Array<ArrayBuffer>,
    close: async (deadlineMs) => {
      const timer = setTimeout(() => giveUp(new Error('The database was not closed in time; what was acknowledged is stored.')), deadlineMs)
      await send({ kind: 'close' }).catch(() => undefined) // Closing is over either way: what was acknowledged is in the log.
      clearTimeout(timer)
      fate ??= new Error('The database is closed.')
      await worker.terminate()
    },
    lost: lost.promise,
  }
}
