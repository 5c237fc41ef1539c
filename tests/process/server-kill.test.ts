import { expect, test } from 'vitest'

import { NoteWriter, signInJunior } from './note-writer.ts'
import { makeFolder, startServer } from './programs.ts'

const kills = 20

test(
  `the server, killed ${kills} times under four writing devices, starts again each time and has every event that it acknowledged`,
  async () => {
    const environment = { PULLCORD_DATA: await makeFolder() }
    let writers: readonly NoteWriter[] | null = null
    for (let cycle = 0; cycle < kills; cycle += 1) {
      // Each start takes the lock of a process that had no time to let go of it.
      const server = await startServer(environment)
      if (writers === null) {
        const session = await signInJunior(server.url)
        writers = Array.from({ length: 4 }, () => new NoteWriter(session))
      }
      for (const writer of writers) await writer.expectWhole(server.url)
      const writing = writers.map((writer) => writer.writeUntilGone(server.url))
      await new Promise((resolve) => setTimeout(resolve, 150 + cycle * 35))
      await server.end('SIGKILL')
      await Promise.all(writing)
    }
    const server = await startServer(environment)
    for (const writer of writers ?? []) {
      await writer.expectWhole(server.url)
      expect(writer.acknowledged.length).toBeGreaterThan(kills)
    }
    expect(await server.end('SIGTERM')).toBe(0)
  },
  900_000,
)
