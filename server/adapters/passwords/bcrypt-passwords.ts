import type { Worker } from 'node:worker_threads'
import { AppError } from '#server/lib/app-error.ts'
import type { Passwords } from '#server/lib/deps.ts'
import { startWorker } from '#server/lib/start-worker.ts'
import type { BcryptOrder, BcryptReply } from './bcrypt-messages.ts'

/** More waiting than this means minutes of waiting for the last one: better said at once. */
const mostWaiting = 24

type Waiter = { readonly resolve: (answer: string | boolean) => void; readonly reject: (error: Error) => void }

/**
 * Passwords hashed by bcrypt in a worker thread, one after the other, so that no request waits for another one's hash. The thread
 * starts with the first password, and keeps the process alive only while somebody waits for it. `cost` is the work factor: each step doubles the time.
 */
export function createBcryptPasswords(cost: number): Passwords {
  const waiting = new Map<number, Waiter>()
  let worker: Worker | null = null
  let lastNumber = 0

  const giveUp = (error: Error): void => {
    worker = null
    for (const { reject } of waiting.values()) reject(error)
    waiting.clear()
  }

  const getWorker = (): Worker => {
    if (worker !== null) return worker
    const started = startWorker(new URL('./bcrypt-worker.ts', import.meta.url), null)
    started.on('message', (reply: BcryptReply) => {
      const waiter = waiting.get(reply.number)
      waiting.delete(reply.number)
      if (waiting.size === 0) started.unref()
      if ('answer' in reply) waiter?.resolve(reply.answer)
      else waiter?.reject(new Error(reply.fault))
    })
    started.on('error', giveUp)
    started.on('exit', () => {
      if (worker === started) giveUp(new Error('The thread that hashes passwords stopped.'))
    })
    worker = started
    return started
  }

  const ask = (order: BcryptOrder): Promise<string | boolean> => {
    if (waiting.size >= mostWaiting) return Promise.reject(new AppError('busy', 'Too many sign-ins at once. Try again in a moment.', { retryAfterSeconds: 5 }))
    return new Promise((resolve, reject) => {
      lastNumber += 1
      waiting.set(lastNumber, { resolve, reject })
      const thread = getWorker()
      thread.ref()
      thread.postMessage({ ...order, number: lastNumber })
    })
  }

  return {
    hash: async (password) => String(await ask({ kind: 'hash', password, cost })),
    verify: async (password, hash) => (await ask({ kind: 'verify', password, hash })) === true,
  }
}
