import { readFile } from 'node:fs/promises'
import { join } from 'node:path'

import { expect, test } from 'vitest'

import { demoStories } from '#seeds-demo/demo-stories.ts'

import { NoteWriter, signInJunior } from './note-writer.ts'
import { makeUsedFolder, runToEnd, startServer } from './programs.ts'

const openers = 20

test(
  `${openers} second openers of a live folder, servers and commands in turn, are refused within 2 seconds with the holder's name and harm nothing`,
  async () => {
    const folder = await makeUsedFolder('demo')
    const environment = { PULLCORD_DATA: folder }
    const server = await startServer(environment)
    const writer = new NoteWriter(await signInJunior(server.url))
    const writing = writer.writeUntilGone(server.url, 25)
    const holder = await readFile(join(folder, 'holder.json'), 'utf8')
    const times: number[] = []
    for (let opener = 0; opener < openers; opener += 1) {
      const args = opener % 2 === 0 ? ['server/main.ts'] : ['server/cli.ts', opener % 4 === 1 ? 'doctor' : 'create-owner']
      const { status, stdout, stderr, ms } = await runToEnd(args, { ...environment, PORT: '0' })
      expect({ status, stdout }).toEqual({ status: 1, stdout: '' })
      expect(stderr).toMatch(new RegExp(`^The data folder ${folder} is in use by the server with process id ${server.pid}, started at .*PULLCORD_DATA\\.\\n$`))
      times.push(ms)
    }
    // One that other programs of the machine held up does not count against the others.
    expect(times.sort((a, b) => a - b)[openers / 2]).toBeLessThan(2_000)
    expect(await readFile(join(folder, 'holder.json'), 'utf8')).toBe(holder)
    const written = writer.acknowledged.length
    await expect.poll(() => writer.acknowledged.length).toBeGreaterThan(written)
    expect(await server.end('SIGTERM')).toBe(0)
    await writing
    const again = await startServer(environment)
    await writer.expectWhole(again.url)
    await again.end('SIGTERM')
    const { status, stdout } = await runToEnd(['server/cli.ts', 'doctor'], environment)
    expect(status).toBe(0)
    expect(JSON.parse(stdout)).toMatchObject({ walks: demoStories.length + 1, walksWithHoles: [] })
  },
  300_000,
)
