import type { FormEvent, ReactNode } from 'react'
import { useId, useRef } from 'react'

import { limitWords } from '#shared/chart/judge.ts'
import type { Result } from '#shared/lib/result.ts'
import { formatValue, unitWords } from '#shared/units/format-value.ts'
import type { SpecLimit } from '#shared/units/limits.ts'
import type { Quantity, Unit } from '#shared/units/quantities.ts'
import { unitsOfQuantity } from '#shared/units/quantities.ts'
import type { TypedValueRefusal } from '#shared/units/read-value.ts'
import type { MarkState } from '#src/components/ui/state-mark.tsx'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import { Keypad } from '#src/features/walk-player/parts/keypad.tsx'
import { LimitsBar } from '#src/features/walk-player/parts/limits-bar.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { useShortcut } from '#src/lib/shortcuts.ts'

type ValueEntryProps = {
  /** What the value is, for ears: "Full speed, no load". */
  readonly label: string
  readonly quantity: Quantity
  readonly text: string
  readonly onText: (text: string) => void
  readonly unit: Unit
  readonly onUnit: (unit: Unit) => void
  /** What the typed text is read as; `null` while nothing is typed. */
  readonly typed: Result<number, TypedValueRefusal> | null
  /** The value that counts now: the typed one, else the last try. */
  readonly value: number | null
  readonly limits: SpecLimit | null
  readonly mark: { readonly state: MarkState; readonly words: string } | null
  /** The Enter key in the field. */
  readonly onEnter: () => void
  /** Between the value and the pad: the tries so far. */
  readonly under?: ReactNode
  /** Below the pad: Record, or the outcomes to pick from. */
  readonly children: ReactNode
}

/** A measured value: the field, its unit, the limits that judge it at once, and the page's own pad. */
export function ValueEntry(props: ValueEntryProps) {
  const { label, quantity, text, onText, unit, onUnit, typed, mark, onEnter, under, children } = props
  const { format } = usePlayer()
  const id = useId()
  const field = useRef<HTMLInputElement>(null)
  useShortcut('r', 'Type the reading', () => field.current?.focus())
  const submit = (event: FormEvent): void => {
    event.preventDefault()
    onEnter()
  }
  return (
    <form onSubmit={submit} className="grid gap-2" noValidate>
      <div>
        <div className="flex items-center gap-3 border-b-3 border-ink focus-within:border-focus">
          <label htmlFor={id} className="for-ears">
            {label}
          </label>
          <input
            ref={field}
            id={id}
            value={text}
            onChange={(event) => onText(event.target.value.slice(0, 200))}
            // The page's own pad stands below; a keyboard that is plugged in still types here.
            inputMode="none"
            autoComplete="off"
            spellCheck={false}
            placeholder="–"
            aria-invalid={typed?.ok === false || undefined}
            aria-describedby={`${id}-under`}
            className="figures h-14 min-w-0 bg-transparent text-reading font-medium placeholder:text-ink-2 focus-visible:outline-none"
            style={{ width: `${Math.min(10, Math.max(3, text.length + 1))}ch` }}
          />
          <UnitChoice units={unitsOfQuantity[quantity]} unit={unit} onUnit={onUnit} />
          {mark !== null && typed?.ok === true && (
            <StateMark state={mark.state} className="ml-auto text-right text-[1.0625rem] leading-5 md:text-[1.25rem] md:leading-6">
              {mark.words}
            </StateMark>
          )}
        </div>
        <div id={`${id}-under`} className="grid text-small">
          <UnderValue {...props} />
          {under}
        </div>
      </div>
      <Keypad
        decimal={format.decimal}
        hasMinus={quantity === 'temperature'}
        onKey={(key) => onText(`${text}${key}`.slice(0, 20))}
        onErase={() => onText(text.slice(0, -1))}
      />
      {children}
    </form>
  )
}

function UnitChoice({ units, unit, onUnit }: { readonly units: readonly Unit[]; readonly unit: Unit; readonly onUnit: (unit: Unit) => void }) {
  if (units.length === 1) return <span className="figures text-[1.25rem] text-ink-2">{unitWords[unit]}</span>
  return (
    <select
      aria-label="Unit"
      value={unit}
      // The options are the units and nothing else.
      onChange={(event) => onUnit(event.target.value as Unit)}
      className="figures min-h-14 rounded-control border border-rule bg-card px-2 text-[1.25rem]"
    >
      {units.map((each) => (
        <option key={each} value={each}>
          {unitWords[each]}
        </option>
      ))}
    </select>
  )
}

/** Where the value lies, what is wrong with it, or how it was read where its marks could be read two ways. */
function UnderValue({ limits, unit, value, mark, typed, text }: ValueEntryProps) {
  const { format } = usePlayer()
  const isUnfinished = text.endsWith(format.decimal) || text === '-'
  return (
    <>
      {limits === null ? (
        <p className="text-ink-2">No limits are known for this machine: type the value, then say what it means.</p>
      ) : (
        <>
          <LimitsBar limits={limits} unit={unit} value={value} state={mark?.state ?? null} format={format} />
          <p className="for-ears">Limits: {limitWords(limits, unit, format)}</p>
        </>
      )}
      {typed?.ok === false && !isUnfinished && <StateMark state="bad">{typed.error.words}</StateMark>}
      {typed?.ok === true && /\D/.test(text) && <p className="text-ink-2">Read as {formatValue(typed.value, unit, format)}.</p>}
    </>
  )
}
