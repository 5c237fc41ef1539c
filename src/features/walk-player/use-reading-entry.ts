import { useEffect, useState } from 'react'
import { z } from 'zod'

import type { Result } from '#shared/lib/result.ts'
import { ok } from '#shared/lib/result.ts'
import { judgeReading } from '#shared/chart/judge.ts'
import { formatValue } from '#shared/units/format-value.ts'
import { unitSchema } from '#shared/units/limits.ts'
import type { Unit } from '#shared/units/quantities.ts'
import type { TypedValueRefusal } from '#shared/units/read-value.ts'
import { readTypedValue } from '#shared/units/read-value.ts'
import type { Judging, Verdict } from '#shared/walk/judging.ts'
import { judgeTries } from '#shared/walk/judging.ts'
import type { MarkState } from '#src/components/ui/state-mark.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { useScratch } from '#src/features/walk-player/scratch.ts'
import type { Given } from '#src/features/walk-player/use-answering.ts'
import { announce } from '#src/lib/announce.ts'

const trySchema = z.strictObject({ value: z.number(), typed: z.string() })
const entrySchema = z.strictObject({ unit: unitSchema, tries: z.array(trySchema).max(20), text: z.string().max(200) })
type Try = z.infer<typeof trySchema>

/** A value that is being typed, the tries before it, and what they come to. */
export type ReadingEntry = {
  readonly judging: Judging
  readonly unit: Unit
  readonly setUnit: (unit: Unit) => void
  readonly text: string
  readonly setText: (text: string) => void
  readonly tries: readonly Try[]
  readonly dropTry: (index: number) => void
  /** What the typed text is read as; `null` while nothing is typed. */
  readonly typed: Result<number, TypedValueRefusal> | null
  /** The value that counts now: the typed one, else the last try. */
  readonly value: number | null
  readonly verdict: Verdict
  /** Keeps the typed value as a try and makes room for the next. */
  readonly take: () => void
  /** What an event says of the values; empty while nothing was measured. */
  readonly measured: NonNullable<Given['measured']>
  readonly forget: () => void
}

/** How one value stands against the limits of its reading: the outcome's own words with its mark; `null` when nobody can say. */
export function toValueMark({ reading, limits }: Judging, value: number, unit: Unit): { readonly state: MarkState; readonly words: string } | null {
  const outcome = judgeReading(reading, limits, value, unit)
  const choice = reading.outcomes.find(({ id }) => id === outcome)
  if (choice === undefined) return null
  return { state: choice.normal === true ? 'good' : choice.serviceable === true ? 'care' : 'bad', words: choice.title }
}

/** The entry of a reading. `name` keeps what was begun on this device until it is recorded. */
export function useReadingEntry(name: string, judging: Judging): ReadingEntry {
  const { walk, format } = usePlayer()
  const { reading } = judging
  const [kept, keep] = useScratch(walk.walkId, `reading.${name}`, entrySchema)
  const [lastUnit, setLastUnit] = useState(reading.unit)
  const { unit, tries, text } = kept ?? { unit: lastUnit, tries: [], text: '' }
  const typed = text.trim() === '' ? null : readTypedValue(text, { ...format, unit, quantity: reading.quantity })
  const typedTry: Try | null = typed?.ok === true ? { value: typed.value, typed: text } : null
  const all = typedTry === null ? tries : [...tries, typedTry]
  const values = all.map((each) => each.value)
  const verdict: Verdict = typed?.ok === false ? { kind: 'no-value' } : judgeTries(judging, values, unit)
  const value = values.at(-1) ?? null

  useSpokenJudgement(
    typedTry === null ? null : `${formatValue(typedTry.value, unit, format)}: ${toValueMark(judging, typedTry.value, unit)?.words ?? 'not judged'}`,
  )

  const last = all.at(-1)
  return {
    judging,
    unit,
    setUnit: (next) => {
      setLastUnit(next)
      // Values of another unit are not the same values: the tries begin again.
      keep(text === '' ? null : { unit: next, tries: [], text })
    },
    text,
    setText: (next) => keep(next === '' && tries.length === 0 ? null : { unit, tries, text: next }),
    tries,
    dropTry: (index) => keep({ unit, tries: tries.filter((_, at) => at !== index), text }),
    typed,
    value,
    verdict,
    take: () => keep({ unit, tries: all, text: '' }),
    measured:
      last === undefined
        ? {}
        : {
            value: last.value,
            ...(all.length > 1 || judging.repeat !== null ? { values } : {}),
            unit,
            typed: last.typed,
            ...(judging.limits === null ? {} : { limits: judging.limits }),
          },
    forget: () => keep(null),
  }
}

/** A judgement is said once the fingers rest, not with every digit. */
function useSpokenJudgement(words: string | null): void {
  useEffect(() => {
    if (words === null) return
    const timer = setTimeout(() => announce(words), 900)
    return () => clearTimeout(timer)
  }, [words])
}

/** The typed value as a refusal or a value, for an act that needs one. */
export function toTypedValue(entry: ReadingEntry): Result<number, TypedValueRefusal> {
  const { typed, value } = entry
  if (typed !== null) return typed
  return value === null ? { ok: false, error: { code: 'empty', words: 'No value yet. Type what the instrument shows, or choose “No answer”.' } } : ok(value)
}
