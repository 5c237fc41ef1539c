import type { PersonId } from '#shared/lib/ids.ts'
import type { Db } from '#server/db/client.ts'
import { auditLog } from '#server/db/schema/audit-log.ts'
import type { Deps } from '#server/lib/deps.ts'

/** Acts that the owner can look up later. */
export type AuditedAct =
  'signed-in' | 'sign-in-refused' | 'owner-created' | 'person-added' | 'person-changed' | 'link-made' | 'password-set' | 'password-changed' | 'chart-published'

/** Writes down who did what, in the transaction that did it. */
export async function writeAudit(
  tx: Db,
  deps: Deps,
  entry: { act: AuditedAct; personId: PersonId | null; subject: string; detail?: Record<string, string | number | boolean | null> },
): Promise<void> {
  await tx
    .insert(auditLog)
    .values({ id: deps.newId(), at: deps.clock(), personId: entry.personId, act: entry.act, subject: entry.subject, detail: entry.detail ?? {} })
}
