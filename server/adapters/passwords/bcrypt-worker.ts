import { parentPort } from 'node:worker_threads'
import { compareSync, hashSync } from 'bcryptjs'
import type { BcryptReply, BcryptRequest } from './bcrypt-messages.ts'

const port = parentPort
if (port === null) throw new Error('This file runs as a worker.')

port.on('message', (request: BcryptRequest) => {
  port.postMessage(answer(request))
})

function answer(request: BcryptRequest): BcryptReply {
  try {
    return { number: request.number, answer: request.kind === 'hash' ? hashSync(request.password, request.cost) : compareSync(request.password, request.hash) }
  } catch (error) {
    return { number: request.number, fault: error instanceof Error ? error.message : String(error) }
  }
}
