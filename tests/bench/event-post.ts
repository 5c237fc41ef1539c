import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { mkdtemp, rm } from 'node:fs/promises'
import { Agent, request } from 'node:http'
import { tmpdir } from 'node:os'
import { join } from 'node:path'

import { demoSignIns } from '#server/services/demo-sign-ins.ts'
import { logOf, publish } from '#tests/api/saw-walks.ts'
import { Client, type TestPerson } from '#tests/api/test-shop.ts'
import { sawChart } from '#tests/support/walk-charts.ts'
import { median, type Measured } from './report.ts'

const clients = 8
const walksAClient = 12
const rounds = 5

/** Posts of one event each through the whole server, beside the same bodies put down by a bare insert handler in the same process. */
export async function measureEventPost(): Promise<Measured> {
  const folder = await mkdtemp(join(tmpdir(), 'pullcord-bench-'))
  const child = spawn(process.execPath, ['--import', 'tsx', 'tests/bench/event-server.ts'], {
    env: { ...process.env, PULLCORD_DATA: folder, DEMO: '1', NODE_ENV: 'development' },
    stdio: ['ignore', 'pipe', 'inherit'],
  })
  try {
    const [line] = (await once(child.stdout, 'data')) as [Buffer]
    const { app, reference } = JSON.parse(line.toString()) as { app: string; reference: string }
    const { client, person } = await signInAt(app, 'junior')
    await publish((await signInAt(app, 'lead')).client, sawChart)
    const cookie = [...client.cookies].map(([name, value]) => `${name}=${value}`).join('; ')

    const ratios: number[] = []
    const speeds: number[] = []
    for (let round = 0; round <= rounds; round += 1) {
      const ours = await postsASecond(makeLogs(person), (event) => ({ url: `${app}/api/walks/${event.walkId}/events`, body: { events: [event] }, cookie }))
      const plain = await postsASecond(makeLogs(person), (event) => ({ url: `${reference}/rows`, body: { event }, cookie }))
      if (round === 0) continue // Both are warm after one.
      ratios.push(ours / plain)
      speeds.push(ours)
    }
    return { what: 'event post through the whole server', ratio: median(ratios), against: 'a bare Express + Drizzle insert handler', goal: { atLeast: 0.8 }, detail: `${Math.round(median(speeds))} posts a second here` }
  } finally {
    child.kill('SIGTERM')
    await once(child, 'exit')
    await rm(folder, { recursive: true, force: true })
  }
}

async function signInAt(base: string, role: 'junior' | 'lead'): Promise<{ client: Client; person: TestPerson }> {
  const signIn = demoSignIns.find((one) => one.role === role)
  if (signIn === undefined) throw new Error(`The demo shop has no ${role}.`)
  const client = new Client(base)
  const { body } = await client.post('/api/session', { email: signIn.email, password: signIn.password })
  return { client, person: { ...(body['person'] as unknown as TestPerson), password: signIn.password } }
}

type Log = ReturnType<typeof logOf>['events']

function makeLogs(person: TestPerson): Log[][] {
  return Array.from({ length: clients }, () => Array.from({ length: walksAClient }, () => logOf(person).events))
}

type Post = { readonly url: string; readonly body: unknown; readonly cookie: string }

/** Every client sends its logs one event after the other; an answer other than 200 ends the benchmark. */
async function postsASecond(logs: readonly Log[][], toPost: (event: Log[number]) => Post): Promise<number> {
  const agent = new Agent({ keepAlive: true, maxSockets: clients })
  const startedAt = performance.now()
  let count = 0
  await Promise.all(
    logs.map(async (own) => {
      for (const event of own.flat()) {
        await post(agent, toPost(event))
        count += 1
      }
    }),
  )
  agent.destroy()
  return (count * 1000) / (performance.now() - startedAt)
}

function post(agent: Agent, { url, body, cookie }: Post): Promise<void> {
  return new Promise((resolve, reject) => {
    const text = JSON.stringify(body)
    const sent = request(url, { agent, method: 'POST', headers: { 'content-type': 'application/json', 'content-length': Buffer.byteLength(text), cookie } }, (answer) => {
      let said = ''
      answer.setEncoding('utf8').on('data', (chunk: string) => (said += chunk))
      answer.on('end', () => {
        if (answer.statusCode !== 200 || /"status":"(?!appended)/.test(said)) reject(new Error(`${url} answered ${answer.statusCode}: ${said}`))
        else resolve()
      })
    })
    sent.on('error', reject)
    sent.end(text)
  })
}
