import { chmod, mkdtemp, readdir, readFile, rm, stat, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'

import { afterEach, beforeEach, describe, expect, test } from 'vitest'

import { keepSessionSecret } from './session-secret.ts'

let folder: string
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'pullcord-secret-'))
})
afterEach(() => rm(folder, { recursive: true }))

describe('the session secret', () => {
  test('is made once, kept for this user alone, and is the same at the next start', async () => {
    const secret = await keepSessionSecret(folder)
    expect(secret.length).toBeGreaterThanOrEqual(64)
    expect((await stat(join(folder, 'session-secret'))).mode & 0o777).toBe(0o600)
    expect(await keepSessionSecret(folder)).toBe(secret)
    expect(await readdir(folder)).toEqual(['session-secret'])
  })

  test('is one for all when several start at once', async () => {
    const secrets = await Promise.all(Array.from({ length: 8 }, () => keepSessionSecret(folder)))
    expect(new Set(secrets).size).toBe(1)
  })

  test('that others could read is closed to them', async () => {
    const secret = await keepSessionSecret(folder)
    await chmod(join(folder, 'session-secret'), 0o644)
    expect(await keepSessionSecret(folder)).toBe(secret)
    expect((await stat(join(folder, 'session-secret'))).mode & 0o777).toBe(0o600)
  })

  test('that is too short to be one is refused in words and left as it is', async () => {
    await writeFile(join(folder, 'session-secret'), 'half')
    await expect(keepSessionSecret(folder)).rejects.toThrow(/holds no usable secret.*Delete it/)
    expect(await readFile(join(folder, 'session-secret'), 'utf8')).toBe('half')
  })
})
