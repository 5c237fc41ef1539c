/** What the main thread asks of the worker that holds the engine, and what comes back. Only plain data crosses. */
export type EngineRequest =
  | { readonly id: number; readonly kind: 'query'; readonly transaction: number | null; readonly sql: string; readonly params: readonly unknown[]; readonly rowMode: 'array' | 'object' }
  /** Opens a transaction under a number that the main thread picks, so that its first statement need not wait for an answer. */
  | { readonly id: number; readonly kind: 'begin'; readonly transaction: number }
  | { readonly id: number; readonly kind: 'commit' | 'rollback'; readonly transaction: number }
  | { readonly id: number; readonly kind: 'image' | 'close' }

/** The request without its number, which the sender adds. */
export type EngineOrder = EngineRequest extends infer Request ? (Request extends unknown ? Omit<Request, 'id'> : never) : never

/** The fields of a PostgreSQL error that code may look at; the other engine's errors carry the same names. */
export type EngineFault = {
  readonly message: string
  readonly code?: string
  readonly detail?: string
  readonly constraint?: string
  readonly table?: string
  readonly column?: string
}

export type EngineReply =
  | { readonly id: number; readonly ok: true; readonly value: unknown }
  | { readonly id: number; readonly ok: false; readonly fault: EngineFault }
  /** The engine can't go on; nothing that waits for an answer will get one. */
  | { readonly id: null; readonly ok: false; readonly fault: EngineFault }

/** What the worker is started with. */
export type EngineStart = {
  /** Folder of the database, or null for one in memory. */
  readonly folder: string | null
  /** For a database in memory: the image that it begins with. */
  readonly image: Uint8Array<ArrayBuffer> | null
  /** Idle time after which the log is folded into the data files. */
  readonly checkpointAfterMs: number
}
