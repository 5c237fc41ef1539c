// A process of the benchmark: the real server on a new data folder and, in the same process and on the same database client, a bare handler that
// does nothing but insert a row. Prints the addresses of both as one line of JSON.
import { createServer, type Server } from 'node:http'
import type { AddressInfo } from 'node:net'

import { sql } from 'drizzle-orm'
import { integer, jsonb, pgTable, uuid } from 'drizzle-orm/pg-core'
import express from 'express'

import { loadDemo } from '#seeds-demo/load-demo.ts'
import { createApp } from '#server/app.ts'
import { holdFolder } from '#server/db/folder-lock.ts'
import { openDatabase } from '#server/db/open-database.ts'
import { parseEnvironment } from '#server/lib/config.ts'
import { createLog } from '#server/lib/log.ts'
import { openShop } from '#server/open-shop.ts'

const environment = parseEnvironment(process.env)
if (!environment.ok) throw new Error(environment.error.join('\n'))
const hold = await holdFolder(environment.value.dataFolder, 'server')
const database = await openDatabase({ hold })
const shop = await openShop(database, environment.value, createLog({ level: 'silent' }))
const { db } = database
await loadDemo(shop.deps)

const rows = pgTable('bench_rows', { id: uuid().primaryKey(), walkId: uuid('walk_id').notNull(), seq: integer().notNull(), event: jsonb().notNull() })
await db.execute(sql`create table bench_rows (id uuid primary key, walk_id uuid not null, seq integer not null, event jsonb not null, unique (walk_id, seq))`)

const bare = express()
bare.use(express.json())
bare.post('/rows', async (request, response) => {
  const { event } = request.body as { event: { id: string; walkId: string; seq: number } }
  await db.insert(rows).values({ id: event.id, walkId: event.walkId, seq: event.seq, event })
  response.json({ id: event.id })
})

const servers = [createServer(createApp(shop.deps)), createServer(bare)]
const [app, reference] = await Promise.all(servers.map(listen))
process.stdout.write(`${JSON.stringify({ app, reference })}\n`)
process.once('SIGTERM', () => {
  for (const server of servers) server.closeAllConnections()
  void database.close().then(() => process.exit(0))
})

async function listen(server: Server): Promise<string> {
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  // A TCP server's address is an object once it listens.
  return `http://127.0.0.1:${(server.address() as AddressInfo).port}`
}
