import { existsSync } from 'node:fs'
import { readdir, stat, statfs } from 'node:fs/promises'
import { join } from 'node:path'

import { holdFolder } from '#server/db/folder-lock.ts'
import { openDatabase } from '#server/db/open-database.ts'
import { parseEnvironment } from '#server/lib/config.ts'
import type { Environment } from '#server/lib/config.ts'
import type { OpenShop } from '#server/open-shop.ts'
import { BadInput } from './verb.ts'
import type { Answer, VerbTable } from './verb.ts'

/** What needs the shop's database: each takes the data folder first, so none runs beside a server that has it. */
export const shopVerbs: VerbTable = {
  'create-owner': {
    usage: '',
    does: 'a one-time code with which the first owner sets up the shop in the browser',
    run: async (args) => {
      refuseArguments('create-owner', args)
      return withShop(async ({ deps }) => {
        const { makeOwnerCode } = await import('#server/services/first-owner.ts')
        const owner = await makeOwnerCode(deps)
        if (owner === null) throw new BadInput('This shop has its owner already. Further people are added by the owner, under People.')
        return { json: { code: owner.code, expiresAt: owner.expiresAt.toISOString(), enterAt: deps.config.publicUrl } }
      })
    },
  },
  'seed-demo': {
    usage: '',
    does: 'loads the demo shop into an empty database',
    run: async (args) => {
      refuseArguments('seed-demo', args)
      return withShop(async ({ deps }) => {
        if (deps.config.isProduction) throw new BadInput('NODE_ENV is production, and the demo shop has sign-ins that everybody knows. Nothing was changed.')
        const { isSetUp } = await import('#server/services/shop.ts')
        if (await isSetUp(deps.db)) throw new BadInput('This database holds a shop already, so the demo shop was not loaded. Name an empty one with PULLCORD_DATA or DATABASE_URL.')
        const [{ loadDemo }, { demoSignIns }] = await Promise.all([import('#seeds-demo/load-demo.ts'), import('#server/services/demo-sign-ins.ts')])
        await loadDemo(deps)
        return { json: { signIns: demoSignIns } }
      })
    },
  },
  doctor: {
    usage: '',
    does: 'whether the database opens and its walk logs are whole; status 1 when not',
    run: async (args) => {
      refuseArguments('doctor', args)
      return withShop(report, refuseToMake)
    },
  },
}

function refuseArguments(verb: string, args: readonly string[]): void {
  if (args.length > 0) throw new BadInput(`"${verb}" takes nothing after it, but was given "${args.join(' ')}".`)
}

/** Looking must not make what it looks for. */
function refuseToMake({ databaseUrl, dataFolder }: Environment): void {
  if (databaseUrl === null && !existsSync(join(dataFolder, 'database'))) throw new BadInput(`There is no database in ${dataFolder} yet. Start the server once, or name another folder with PULLCORD_DATA.`)
}

async function withShop(act: (shop: OpenShop, environment: Environment) => Promise<Answer>, before: (environment: Environment) => void = () => undefined): Promise<Answer> {
  const read = parseEnvironment(process.env)
  if (!read.ok) throw new BadInput(`The environment has wrong values. ${read.error.join(' ')}`)
  const environment = read.value
  before(environment)
  const hold = environment.databaseUrl === null ? await holdFolder(environment.dataFolder, 'command line') : null
  try {
    const database = await openDatabase(hold === null ? { databaseUrl: environment.databaseUrl ?? '' } : { hold })
    try {
      const [{ openShop }, { createLog }] = await Promise.all([import('#server/open-shop.ts'), import('#server/lib/log.ts')])
      return await act(await openShop(database, environment, createLog({ level: 'warn' })), environment)
    } finally {
      await database.close()
    }
  } finally {
    await hold?.release()
  }
}

async function report({ deps: { db, database, config } }: OpenShop, { dataFolder }: Environment): Promise<Answer> {
  const { examine } = await import('#server/db/examine.ts')
  const findings = await examine(db)
  const folder = database.engine === 'pglite' ? await measureFolder(dataFolder) : {}
  return { json: { engine: database.engine, isDemo: config.demo, ...folder, ...findings }, failed: findings.walksWithHoles.length > 0 }
}

async function measureFolder(folder: string): Promise<Readonly<Record<string, unknown>>> {
  const database = join(folder, 'database')
  const { bavail, bsize } = await statfs(folder)
  return { folder, databaseMegabytes: toMegabytes(await measure(database)), logMegabytes: toMegabytes(await measure(join(database, 'pg_wal'))), freeMegabytes: toMegabytes(bavail * bsize) }
}

async function measure(folder: string): Promise<number> {
  const entries = await readdir(folder, { withFileTypes: true, recursive: true })
  const sizes = await Promise.all(entries.filter((entry) => entry.isFile()).map(async (entry) => (await stat(join(entry.parentPath, entry.name))).size))
  return sizes.reduce((sum, size) => sum + size, 0)
}

function toMegabytes(bytes: number): number {
  return Math.round(bytes / (1024 * 1024))
}
