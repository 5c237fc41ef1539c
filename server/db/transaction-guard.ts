import { AsyncLocalStorage } from 'node:async_hooks'

import type { Db } from './client.ts'

const words =
  'The outer database client was used inside a transaction: the one connection waits for that transaction, so this would hang for ever. Use the tx that the callback is handed.'

/**
 * Makes the outer client throw at once when it is used inside a transaction's callback, however deep in its calls. Both engines are
 * guarded alike: on one the statement would never be answered, on the other it would silently run outside the transaction.
 * What was started inside and goes on after the transaction is over may use the client again.
 */
export function guardOuterClient(db: Db): Db {
  const around = new AsyncLocalStorage<{ isOpen: boolean }>()
  const refuseInside = (): void => {
    if (around.getStore()?.isOpen === true) throw new Error(words)
  }
  // A transaction gets a session of its own, so what is replaced here concerns the outer client alone.
  const { session } = db._
  const prepareQuery = session.prepareQuery.bind(session)
  session.prepareQuery = (...args) => {
    const prepared = prepareQuery(...args)
    const execute = prepared.execute.bind(prepared)
    prepared.execute = async (values) => {
      refuseInside()
      return execute(values)
    }
    return prepared
  }
  const transaction = session.transaction.bind(session)
  session.transaction = async (act, config) => {
    refuseInside()
    const mark = { isOpen: true }
    try {
      return await transaction((tx) => around.run(mark, () => act(tx)), config)
    } finally {
      mark.isOpen = false
    }
  }
  return db
}
