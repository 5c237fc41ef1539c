import { asc, sql } from 'drizzle-orm'
import type { MachineModel } from '#shared/api/models.ts'
import type { Cause, ChartDocument } from '#shared/chart/document.ts'
import type { Db } from '#server/db/client.ts'
import { causes, models, serviceItems, specKeys } from '#server/db/schema/library.ts'
import type { Deps } from '#server/lib/deps.ts'

/** Takes what a chart brings by id into the shop's library. What the shop holds stays as it is; a grade belongs to its chart and stays there. */
export async function bringLibrary(tx: Db, deps: Deps, { library }: ChartDocument): Promise<void> {
  const createdAt = deps.clock()
  const newCauses = (library.causes ?? []).map((cause) => ({
    id: cause.id,
    title: cause.title,
    system: cause.system,
    isUnsafe: cause.unsafe ?? false,
    isContributing: cause.contributing ?? false,
    advice: cause.advice ?? null,
    remedy: cause.remedy ?? null,
    createdAt,
  }))
  const newItems = (library.serviceItems ?? []).map(({ id, title, minutes }) => ({ id, title, minutes: minutes ?? null, createdAt }))
  const newKeys = (library.specKeys ?? []).map(({ id, title, quantity, unit, general }) => ({ id, title, quantity, unit, general: general ?? null, createdAt }))
  if (newCauses.length > 0) await tx.insert(causes).values(newCauses).onConflictDoNothing()
  if (newItems.length > 0) await tx.insert(serviceItems).values(newItems).onConflictDoNothing()
  if (newKeys.length > 0) await tx.insert(specKeys).values(newKeys).onConflictDoNothing()
}

/** The shop's causes, contributing ones included, by title. */
export async function listCauses(deps: Deps): Promise<Cause[]> {
  const rows = await deps.db
    .select()
    .from(causes)
    .orderBy(asc(sql`lower(${causes.title})`), asc(causes.id))
  return rows.map((row) => ({
    id: row.id,
    title: row.title,
    system: row.system,
    ...(row.isUnsafe ? { unsafe: true } : {}),
    ...(row.isContributing ? { contributing: true } : {}),
    ...(row.advice === null ? {} : { advice: row.advice }),
    ...(row.remedy === null ? {} : { remedy: row.remedy }),
  }))
}

/** The models with their spec sheets, by maker and name. */
export async function listModels(deps: Deps): Promise<MachineModel[]> {
  const rows = await deps.db
    .select()
    .from(models)
    .orderBy(asc(sql`lower(${models.maker})`), asc(sql`lower(${models.name})`), asc(models.id))
  return rows.map(({ createdAt: _, ...model }) => model)
}

/** Adds models with their spec sheets; those that are there stay as they are. */
export async function addModels(deps: Deps, added: readonly MachineModel[]): Promise<void> {
  if (added.length === 0) return
  await deps.db
    .insert(models)
    .values(added.map((model) => ({ ...model, createdAt: deps.clock() })))
    .onConflictDoNothing()
}
