/** Most that goes together: a statement that somebody waits for stays short. */
const mostAtOnce = 64

/**
 * Sends work to the database in company: while one statement is under way, whoever comes meanwhile waits and goes along in the next
 * one. Nothing is kept and nobody waits for company: with no statement under way the work goes at once, alone. `run` answers each
 * item in order; when it fails, all of them fail.
 */
export function createBatcher<Item, Answer>(run: (items: readonly Item[]) => Promise<readonly Answer[]>): (item: Item) => Promise<Answer> {
  type Waiting = { readonly item: Item; readonly resolve: (answer: Answer) => void; readonly reject: (reason: unknown) => void }
  let waiting: Waiting[] = []
  let isRunning = false

  async function runAll(): Promise<void> {
    isRunning = true
    while (waiting.length > 0) {
      const batch = waiting.slice(0, mostAtOnce)
      waiting = waiting.slice(mostAtOnce)
      try {
        const answers = await run(batch.map(({ item }) => item))
        // `run` answers every item.
        batch.forEach(({ resolve }, order) => resolve(answers[order] as Answer))
      } catch (error) {
        for (const { reject } of batch) reject(error)
      }
    }
    isRunning = false
  }

  return (item) =>
    new Promise((resolve, reject) => {
      waiting.push({ item, resolve, reject })
      if (!isRunning) void runAll()
    })
}
