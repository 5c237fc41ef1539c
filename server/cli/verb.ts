/** What a verb sees of the world: its input and a place for notes. Only the dispatcher touches the process. */
export type Io = {
  /** Reads a file whole, or standard input when the name is `-`; a file that can't be read is bad input. */
  readonly read: (file: string) => Promise<string>
  /** Says something on stderr that is not an error. */
  readonly note: (text: string) => void
}

/**
 * What a verb answers: `json`, printed on stdout in any case, or the `text` of a file, printed as it is; `failed` makes the exit status 1
 * (a chart with errors).
 */
export type Answer = { readonly json?: unknown; readonly text?: string; readonly failed?: boolean }

/** One command: the arguments that it takes, what it does in a few words, and the act. */
export type Verb = {
  readonly usage: string
  readonly does: string
  readonly run: (args: readonly string[], io: Io) => Promise<Answer>
}

/** The verbs of one group by name, for example `check` and `musts` of `chart`. */
export type VerbTable = Readonly<Record<string, Verb>>

/** Input that a verb refuses: its words go to stderr as one line, and the exit status is 1. */
export class BadInput extends Error {
  override readonly name = 'BadInput'
}
