/**
 * Turns a stored chart of one format version into the next. It works on plain JSON, because the types of an old version
 * are gone: take what is there, return a new value, leave the argument untouched, and never throw on odd input (the
 * schema speaks after the last step).
 */
export type MigrationStep = (json: Readonly<Record<string, unknown>>) => Record<string, unknown>

/**
 * All steps in order: the first turns version 1 into version 2, the next 2 into 3, and so on. Version 1 is the first and
 * the current one, so nothing stands here yet. To add version 2: write `v1-to-v2.ts` beside this file, append its step,
 * raise `currentFormatVersion`, and keep a frozen version 1 document in tests/documents/. A shipped step is never edited.
 */
export const migrationSteps: readonly MigrationStep[] = []

/**
 * Brings a stored chart of version `from` up to the version after the last step. Each step sees what the one before it
 * returned and raises `formatVersion` by one.
 */
export function migrate(json: Readonly<Record<string, unknown>>, from: number, steps: readonly MigrationStep[] = migrationSteps): Record<string, unknown> {
  return steps.slice(from - 1).reduce<Record<string, unknown>>((older, step, offset) => ({ ...step(older), formatVersion: from + offset + 1 }), json)
}
