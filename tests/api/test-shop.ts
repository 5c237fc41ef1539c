import { createServer, type Server } from 'node:http'
import type { AddressInfo } from 'node:net'
import type { SignedIn } from '#shared/api/session.ts'
import type { PersonId } from '#shared/lib/ids.ts'
import type { Role } from '#shared/trade/roles.ts'
import { createBcryptPasswords } from '#server/adapters/passwords/bcrypt-passwords.ts'
import { createApp, type AppOptions } from '#server/app.ts'
import type { Config } from '#server/lib/config.ts'
import type { Deps } from '#server/lib/deps.ts'
import { createIdSource, randomToken } from '#server/lib/ids.ts'
import { createLog } from '#server/lib/log.ts'
import { createFirstOwner, makeOwnerCode } from '#server/services/first-owner.ts'
import { acceptLink } from '#server/services/links.ts'
import { addPerson } from '#server/services/people.ts'
import { endSession } from '#server/services/sessions.ts'
import { createTestDb } from '#tests/support/test-db.ts'

/** An answer as a test looks at it. */
export interface Answer {
  readonly status: number
  readonly headers: Headers
  // Tests look into answers of every form; the contracts judge the form.
  readonly body: Readonly<Record<string, unknown>>
  readonly text: string
}

export interface Asking {
  readonly body?: unknown
  readonly headers?: Readonly<Record<string, string>>
}

/** A browser: keeps its cookies. */
export class Client {
  readonly #base: string
  readonly cookies = new Map<string, string>()

  constructor(base: string) {
    this.#base = base
  }

  async ask(method: string, path: string, { body, headers }: Asking = {}): Promise<Answer> {
    const cookie = [...this.cookies].map(([name, value]) => `${name}=${value}`).join('; ')
    const response = await fetch(this.#base + path, {
      method,
      redirect: 'manual',
      headers: { ...(cookie === '' ? {} : { cookie }), ...(body === undefined ? {} : { 'content-type': 'application/json' }), ...headers },
      ...(body === undefined ? {} : { body: typeof body === 'string' ? body : JSON.stringify(body) }),
    })
    this.#keepCookies(response.headers.getSetCookie())
    const text = await response.text()
    const isJson = response.headers.get('content-type')?.includes('json') === true
    return { status: response.status, headers: response.headers, body: (isJson ? JSON.parse(text) : {}) as Answer['body'], text }
  }

  get = (path: string, asking?: Asking): Promise<Answer> => this.ask('GET', path, asking)
  post = (path: string, body: unknown, headers: Readonly<Record<string, string>> = {}): Promise<Answer> => this.ask('POST', path, { body, headers })
  put = (path: string, body: unknown, headers: Readonly<Record<string, string>> = {}): Promise<Answer> => this.ask('PUT', path, { body, headers })
  patch = (path: string, body: unknown): Promise<Answer> => this.ask('PATCH', path, { body })
  delete = (path: string): Promise<Answer> => this.ask('DELETE', path)

  #keepCookies(lines: readonly string[]): void {
    for (const line of lines) {
      const [pair = '', ...attributes] = line.split('; ')
      const equals = pair.indexOf('=')
      const isGone = attributes.some((attribute) => attribute.startsWith('Expires=Thu, 01 Jan 1970'))
      if (isGone) this.cookies.delete(pair.slice(0, equals))
      else this.cookies.set(pair.slice(0, equals), pair.slice(equals + 1))
    }
  }
}

export interface TestPerson extends SignedIn {
  readonly password: string
}

export interface TestShop {
  readonly deps: Deps
  readonly base: string
  /** Lines of the log so far, as they were written. */
  readonly logLines: readonly string[]
  /** Moves the clock of the server on. */
  readonly wait: (seconds: number) => void
  readonly newClient: () => Client
  /** A new browser in which a person of this role is signed in. */
  readonly as: (role: Role) => Promise<Client>
  readonly person: (role: Role) => TestPerson
  readonly addPerson: (role: Role, name: string) => Promise<TestPerson>
  readonly signIn: (person: TestPerson) => Promise<Client>
  readonly close: () => Promise<void>
}

type Options = { readonly config?: Partial<Config>; readonly app?: AppOptions; readonly withPeople?: boolean }

const passwords: Readonly<Record<Role, string>> = {
  owner: 'vellum tractor oslo',
  lead: 'kettle under gravel roof',
  junior: 'marble otter plain sky',
}

/** A shop on a database of its own, served on a port of its own, with an owner, a lead and a junior. Passwords are hashed at a low cost. */
export async function openTestShop({ config = {}, app = {}, withPeople = true }: Options = {}): Promise<TestShop> {
  const { database, close } = await createTestDb()
  const logLines: string[] = []
  let now = Date.parse('2026-03-02T08:00:00Z')
  const startedAt = performance.now()
  const clock = () => new Date(now + Math.floor(performance.now() - startedAt))
  const server = createServer()
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  const base = `http://127.0.0.1:${(server.address() as AddressInfo).port}`
  const deps: Deps = {
    config: {
      port: 0,
      host: '127.0.0.1',
      dataFolder: '/nowhere',
      databaseUrl: null,
      publicUrl: base,
      sessionSecret: randomToken(32),
      demo: false,
      isProduction: false,
      ...config,
    },
    db: database.db,
    database,
    log: createLog({ level: 'debug', destination: { write: (line: string) => keepLine(logLines, line) } }),
    clock,
    newId: createIdSource(Date.now),
    randomToken,
    passwords: createBcryptPasswords(4),
  }
  server.on('request', createApp(deps, app))
  const people = withPeople ? await addThree(deps) : null
  const newClient = () => new Client(base)
  const signIn = async ({ email, password }: TestPerson) => {
    const client = newClient()
    const answer = await client.post('/api/session', { email, password })
    if (answer.status !== 200) throw new Error(`Sign-in failed: ${answer.text}`)
    return client
  }
  const person = (role: Role): TestPerson => {
    if (people === null) throw new Error('This shop has no people.')
    return people[role]
  }
  return {
    deps,
    base,
    logLines,
    wait: (seconds) => {
      now += seconds * 1000
    },
    newClient,
    as: (role) => signIn(person(role)),
    person,
    addPerson: (role, name) => addByLink(deps, person('owner'), role, name),
    signIn,
    close: async () => {
      await closeServer(server)
      await close()
    },
  }
}

/** Keeps a line of the log; an error that no test should cause is shown where the test runs. */
function keepLine(lines: string[], line: string): void {
  lines.push(line)
  if (line.startsWith('{"level":"error"')) process.stderr.write(line)
}

async function addThree(deps: Deps): Promise<Record<Role, TestPerson>> {
  const code = await makeOwnerCode(deps)
  const given = { name: 'Otis Brand', email: 'otis@fernhill.example', password: passwords.owner }
  const started = await createFirstOwner(deps, { ...given, code: code?.code ?? '', address: 'test', browser: '' })
  await endSession(deps, started.id)
  const owner: TestPerson = { ...given, id: started.personId, role: 'owner' }
  return { owner, lead: await addByLink(deps, owner, 'lead', 'Lena Marsh'), junior: await addByLink(deps, owner, 'junior', 'Jun Okoro') }
}

async function addByLink(deps: Deps, owner: SignedIn, role: Role, name: string): Promise<TestPerson> {
  const { id, name: ownerName, email: ownerEmail } = owner
  const email = `${name.toLowerCase().replaceAll(' ', '.')}@fernhill.example`
  const { person, link } = await addPerson(deps, { id: deps.newId(), person: { id, name: ownerName, email: ownerEmail, role: 'owner' } }, { name, email, role })
  await acceptLink(deps, link.url.slice(link.url.lastIndexOf('/') + 1), passwords[role])
  return { id: person.id as PersonId, name, email, role, password: passwords[role] }
}

function closeServer(server: Server): Promise<void> {
  return new Promise((resolve) => {
    server.close(() => {
      resolve()
    })
    server.closeAllConnections()
  })
}
