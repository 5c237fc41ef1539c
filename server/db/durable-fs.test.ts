import fs from 'node:fs'
import { mkdtemp, open, readFile, rm } from 'node:fs/promises'
import type { FileHandle } from 'node:fs/promises'
import { syncBuiltinESMExports } from 'node:module'
import { tmpdir } from 'node:os'
import { join } from 'node:path'

import { afterAll, afterEach, beforeAll, describe, expect, test, vi } from 'vitest'

import { openEngine } from './engine.ts'
import type { Engine } from './engine.ts'
import { engineMajor } from './folder-state.ts'

let folder: string
let engine: Engine
let lastId = 0
// The engine runs in this thread here, so that what it asks of the disk can be watched.
const query = (sql: string): Promise<{ rows: unknown[] }> =>
  engine.handle({ id: (lastId += 1), kind: 'query', transaction: null, sql, params: [], rowMode: 'object' }) as Promise<{ rows: unknown[] }>

/** Watches the syncs of log files that a commit waits for; `hold` lets none of them end until `release` is called. */
async function watchLogSyncs() {
  const handle = await open(join(folder, 'PG_VERSION'))
  const prototype = Object.getPrototypeOf(handle) as FileHandle
  await handle.close()
  const real = prototype.datasync
  const watched = { count: 0, hold: Promise.resolve(), release: () => undefined as void }
  vi.spyOn(prototype, 'datasync').mockImplementation(async function (this: FileHandle) {
    watched.count += 1
    await watched.hold
    return real.call(this)
  })
  return watched
}

async function openFolder(checkpointAfterMs: number): Promise<void> {
  engine = await openEngine({ folder, image: null, checkpointAfterMs }, (error) => {
    throw error
  })
}

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'pullcord-durable-'))
  await openFolder(3_600_000)
  await query('create table screws (id serial primary key, size text)')
}, 60_000)
afterEach(() => {
  vi.restoreAllMocks()
  syncBuiltinESMExports()
})
afterAll(async () => {
  await engine.handle({ id: 0, kind: 'close' })
  await rm(folder, { recursive: true })
})

describe('the log of the database on disk', { timeout: 30_000 }, () => {
  test('the engine is of the PostgreSQL version that folders are checked against, and syncs', async () => {
    expect((await readFile(join(folder, 'PG_VERSION'), 'utf8')).trim()).toBe(engineMajor)
    expect((await query('show fsync')).rows).toEqual([{ fsync: 'on' }])
  })

  test('a commit is not acknowledged before its log is on the disk', async () => {
    const watched = await watchLogSyncs()
    watched.hold = new Promise((resolve) => (watched.release = resolve))
    let isAcknowledged = false
    const insert = query("insert into screws (size) values ('M5')").then(() => (isAcknowledged = true))
    await vi.waitFor(() => expect(watched.count).toBe(1))
    await new Promise((resolve) => setTimeout(resolve, 30))
    expect(isAcknowledged).toBe(false)
    watched.release()
    await insert
  })

  test('commits that wait together share one sync', async () => {
    const watched = await watchLogSyncs()
    watched.hold = new Promise((resolve) => (watched.release = resolve))
    const inserts = Array.from({ length: 20 }, () => query("insert into screws (size) values ('M6')"))
    await vi.waitFor(() => expect(watched.count).toBe(1))
    watched.release()
    await Promise.all(inserts)
    expect(watched.count).toBeLessThanOrEqual(3)
  })

  test('a read waits for the commits that it may have seen, and costs no sync of its own', async () => {
    const watched = await watchLogSyncs()
    watched.hold = new Promise((resolve) => (watched.release = resolve))
    const insert = query("insert into screws (size) values ('M7')")
    await vi.waitFor(() => expect(watched.count).toBe(1))
    let isAnswered = false
    const read = query("select size from screws where size = 'M7'").then((answer) => {
      isAnswered = true
      return answer
    })
    await new Promise((resolve) => setTimeout(resolve, 50))
    expect(isAnswered).toBe(false)
    watched.release()
    await insert
    expect((await read).rows).toEqual([{ size: 'M7' }])
    await query('select * from screws')
    expect(watched.count).toBe(1)
  })

  test('no data file is written while a commit before it is not on the disk yet', async () => {
    const order: string[] = []
    const { fdatasyncSync, fsyncSync } = fs
    vi.spyOn(fs, 'fdatasyncSync').mockImplementation((descriptor) => {
      order.push('log synced')
      fdatasyncSync(descriptor)
    })
    vi.spyOn(fs, 'fsyncSync').mockImplementation((descriptor) => {
      order.push('data synced')
      fsyncSync(descriptor)
    })
    syncBuiltinESMExports()
    const watched = await watchLogSyncs()
    watched.hold = new Promise((resolve) => (watched.release = resolve))
    const insert = query("insert into screws (size) values ('M8')")
    await vi.waitFor(() => expect(watched.count).toBe(1))
    // A checkpoint writes data files and syncs them; its own answer waits for the log as well.
    const checkpoint = query('checkpoint')
    await vi.waitFor(() => expect(order).toContain('data synced'))
    expect(order[0]).toBe('log synced')
    watched.release()
    await Promise.all([insert, checkpoint])
  })

  test('left alone for a while, the log is folded into the data files', async () => {
    await engine.handle({ id: 0, kind: 'close' })
    await openFolder(200)
    const read = async (): Promise<unknown> => (await query('select redo_lsn from pg_control_checkpoint()')).rows[0]
    const before = await read()
    await query("insert into screws (size) values ('M10')")
    await vi.waitFor(async () => expect(await read()).not.toEqual(before), { timeout: 20_000, interval: 1_000 })
  })
})
