import { parentPort, workerData } from 'node:worker_threads'

import { openEngine, toFault } from './engine.ts'
import type { EngineReply, EngineRequest, EngineStart } from './engine-messages.ts'

const port = parentPort
if (port === null) throw new Error('This file runs as a worker.')
const reply = (message: EngineReply): void => port.postMessage(message)
const fail = (error: unknown): void => reply({ id: null, ok: false, fault: toFault(error) })

/** The first message says that the engine is open, under the number 0; requests count from 1. */
try {
  const engine = await openEngine(workerData as EngineStart, fail)
  port.on('message', (request: EngineRequest) => {
    engine.handle(request).then(
      (value) => reply({ id: request.id, ok: true, value }),
      (error: unknown) => reply({ id: request.id, ok: false, fault: toFault(error) }),
    )
  })
  reply({ id: 0, ok: true, value: null })
} catch (error) {
  fail(error)
}
