/**
 * Reads rows by key, several keys in one statement: while a read is under way, keys that are asked for wait and go together in
 * the next one. Nothing is kept: a key asked for again is read again, after the moment at which it was asked for.
 */
export function createLoader<Row>(read: (keys: readonly string[]) => PromiseLike<readonly Row[]>, keyOf: (row: Row) => string): (key: string) => Promise<Row | null> {
  type Waiting = { key: string; resolve: (row: Row | null) => void; reject: (reason: unknown) => void }
  let waiting: Waiting[] = []
  let isReading = false

  async function readAll(): Promise<void> {
    isReading = true
    while (waiting.length > 0) {
      const batch = waiting
      waiting = []
      try {
        const rows = new Map((await read([...new Set(batch.map(({ key }) => key))])).map((row) => [keyOf(row), row]))
        for (const { key, resolve } of batch) resolve(rows.get(key) ?? null)
      } catch (error) {
        for (const { reject } of batch) reject(error)
      }
    }
    isReading = false
  }

  return (key) =>
    new Promise((resolve, reject) => {
      waiting.push({ key, resolve, reject })
      if (!isReading) void readAll()
    })
}
