import { mkdir, mkdtemp, readdir, readFile, rm, symlink, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'

import { afterEach, beforeEach, describe, expect, test } from 'vitest'

import { holdFolder } from './folder-lock.ts'
import { takePidFile } from './pid-file.ts'

let folder: string
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'pullcord-lock-'))
})
afterEach(() => rm(folder, { recursive: true }))

describe('holding the data folder', () => {
  test('the second one is refused and told who has it, also under another name of the folder', async () => {
    const hold = await holdFolder(folder, 'server')
    await symlink(folder, `${folder}-other-name`)
    await expect(holdFolder(`${folder}-other-name`, 'command line')).rejects.toThrow(
      new RegExp(`in use by the server with process id ${process.pid}, started at \\d{4}-`),
    )
    await rm(`${folder}-other-name`)
    await hold.release()
  })

  test('whoever comes after it was let go may have it, and nothing of the first is left', async () => {
    await (await holdFolder(folder, 'server')).release()
    await expect(readFile(join(folder, 'holder.json'))).rejects.toThrow('ENOENT')
    await (await holdFolder(folder, 'command line')).release()
  })

  test('a holder that has not written its name, or wrote nonsense, still refuses', async () => {
    const hold = await holdFolder(folder, 'server')
    await writeFile(join(folder, 'holder.json'), '{"pid":')
    await expect(holdFolder(folder, 'server')).rejects.toThrow('in use by another process')
    await hold.release()
  })

  test('a folder that is not there is made, for this user alone', async () => {
    const hold = await holdFolder(join(folder, 'deep', 'data'), 'server')
    expect(hold.folder).toBe(join(folder, 'deep', 'data'))
    await hold.release()
  })

  test('a file where the folder should be is refused in words and stays as it is', async () => {
    const path = join(folder, 'a-file')
    await writeFile(path, 'mine')
    await expect(holdFolder(path, 'server')).rejects.toThrow(/is not a folder.*PULLCORD_DATA/)
    expect(await readFile(path, 'utf8')).toBe('mine')
  })
})

describe('the lock by process id, for systems without such sockets', () => {
  const path = (): string => join(folder, 'lock')

  test('the second one is refused, and after the first has let go it is free', async () => {
    const release = await takePidFile(path())
    expect(await takePidFile(path())).toBe(null)
    await release?.()
    expect(await takePidFile(path())).not.toBe(null)
  })

  test('a file left behind by a process that is gone is taken over', async () => {
    await writeFile(`${path()}.7`, '4194304 Thu Jan  1 00:00:00 2026\n')
    expect(await takePidFile(path())).not.toBe(null)
  })

  test('a process id that belongs to another process by now is taken over: its start time differs', async () => {
    await writeFile(`${path()}.7`, `${process.ppid} Thu Jan  1 00:00:00 2026\n`)
    expect(await takePidFile(path())).not.toBe(null)
  })

  test('half a file is taken over', async () => {
    await writeFile(`${path()}.7`, '12')
    expect(await takePidFile(path())).not.toBe(null)
  })

  test('of many that find the same stale file one gets it', async () => {
    await mkdir(join(folder, 'many'))
    const stale = join(folder, 'many', 'lock')
    await writeFile(`${stale}.7`, '4194304 Thu Jan  1 00:00:00 2026\n')
    const taken = await Promise.all(Array.from({ length: 8 }, () => takePidFile(stale)))
    expect(taken.filter((release) => release !== null)).toHaveLength(1)
    expect(await readdir(join(folder, 'many'))).toEqual(['lock.8'])
  })
})
