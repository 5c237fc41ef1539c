import type { StartedSession } from '#server/services/sessions.ts'

/** What an endpoint may say about its answer besides the body. */
export interface Reply {
  /** Names the state that the body shows, as a strong tag. */
  etag(tag: string): void
  /** Gives the browser the cookie of a session that has just begun. */
  startSession(session: StartedSession): void
  /** Takes the session's cookie back. */
  endSession(): void
}
