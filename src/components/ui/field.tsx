import type { ComponentProps, ReactNode } from 'react'
import { useId, useState } from 'react'

import { StateMark } from './state-mark.tsx'

type FieldWords = {
  readonly label: string
  /** What the field wants, said before anything is typed. */
  readonly hint?: ReactNode
  /** What is wrong with it, in words; `undefined` when nothing is. */
  readonly error?: string | undefined
}

/** Wiring of a control to its words: spread `control` onto it. */
type FieldFrameProps = FieldWords & {
  readonly id: string
  readonly children: ReactNode
}

export const controlClass =
  'w-full rounded-control border border-rule bg-card px-3 py-1.5 min-h-(--control) text-ink placeholder:text-ink-2 aria-invalid:border-bad aria-invalid:border-2 disabled:border-dashed'

/** Ids that tie a control to its hint and its error. */
export function describedBy(id: string, { hint, error }: Pick<FieldWords, 'hint' | 'error'>): string | undefined {
  const ids = [...(error === undefined ? [] : [`${id}-error`]), ...(hint === undefined ? [] : [`${id}-hint`])]
  return ids.length === 0 ? undefined : ids.join(' ')
}

/** Label above, control, then the error beside it, then the hint. */
export function FieldFrame({ id, label, hint, error, children }: FieldFrameProps) {
  return (
    <div className="grid gap-1">
      <label htmlFor={id} className="label">
        {label}
      </label>
      {children}
      <FieldError id={id} error={error} />
      {hint !== undefined && (
        <div id={`${id}-hint`} className="text-small text-ink-2">
          {hint}
        </div>
      )}
    </div>
  )
}

export function FieldError({ id, error }: { readonly id: string; readonly error: string | undefined }) {
  return (
    <div id={`${id}-error`} aria-live="polite" className="text-small empty:hidden">
      {error !== undefined && <StateMark state="bad">{error}</StateMark>}
    </div>
  )
}

export function TextField({ label, hint, error, id: ownId, className = '', ...rest }: ComponentProps<'input'> & FieldWords) {
  const madeId = useId()
  const id = ownId ?? madeId
  return (
    <FieldFrame id={id} label={label} hint={hint} error={error}>
      <input
        {...rest}
        id={id}
        aria-invalid={error === undefined ? undefined : true}
        aria-describedby={describedBy(id, { hint, error })}
        className={`${controlClass} ${className}`}
      />
    </FieldFrame>
  )
}

type PasswordFieldProps = Omit<ComponentProps<'input'>, 'type' | 'autoComplete'> & FieldWords & { readonly autoComplete: 'current-password' | 'new-password' }

/** Masked, with a button that shows it. Pasting and password managers are welcome. */
export function PasswordField({ label, hint, error, id: ownId, className = '', ...rest }: PasswordFieldProps) {
  const madeId = useId()
  const id = ownId ?? madeId
  const [isShown, setShown] = useState(false)
  return (
    <FieldFrame id={id} label={label} hint={hint} error={error}>
      <div className="flex">
        <input
          {...rest}
          id={id}
          type={isShown ? 'text' : 'password'}
          spellCheck={false}
          autoCapitalize="off"
          autoCorrect="off"
          aria-invalid={error === undefined ? undefined : true}
          aria-describedby={describedBy(id, { hint, error })}
          className={`${controlClass} min-w-0 flex-1 rounded-r-none focus-visible:z-1 ${className}`}
        />
        <button
          type="button"
          aria-label={`${isShown ? 'Hide' : 'Show'} ${label.toLowerCase()}`}
          aria-controls={id}
          onClick={() => setShown((shown) => !shown)}
          className="-ml-(--rule-width) min-h-(--control) min-w-18 rounded-r-control border border-rule bg-card px-3 text-small font-medium text-cord hover:border-ink focus-visible:z-1"
        >
          {isShown ? 'Hide' : 'Show'}
        </button>
      </div>
    </FieldFrame>
  )
}

type Choice<Value extends string> = { readonly value: Value; readonly words: string; readonly hint?: string }

type SelectFieldProps<Value extends string> = Omit<ComponentProps<'select'>, 'children'> & FieldWords & { readonly choices: readonly Choice<Value>[] }

/** The device's own list: the best one for a thumb and for a keyboard. */
export function SelectField<Value extends string>({ label, hint, error, id: ownId, choices, className = '', ...rest }: SelectFieldProps<Value>) {
  const madeId = useId()
  const id = ownId ?? madeId
  return (
    <FieldFrame id={id} label={label} hint={hint} error={error}>
      <select
        {...rest}
        id={id}
        aria-invalid={error === undefined ? undefined : true}
        aria-describedby={describedBy(id, { hint, error })}
        className={`${controlClass} ${className}`}
      >
        {choices.map(({ value, words }) => (
          <option key={value} value={value}>
            {words}
          </option>
        ))}
      </select>
    </FieldFrame>
  )
}

type RadioGroupProps<Value extends string> = Omit<ComponentProps<'input'>, 'type' | 'value' | 'defaultValue' | 'children'> &
  FieldWords & {
    readonly name: string
    readonly choices: readonly Choice<Value>[]
    /** Only for a group that its parent steers; a form's own group leaves it out. */
    readonly value?: Value
  }

/** A question with its answers in ruled rows; each whole row is the target. The rest of the props go to every radio button. */
export function RadioGroup<Value extends string>({ label, hint, error, choices, name, value, className = '', ...rest }: RadioGroupProps<Value>) {
  const id = useId()
  return (
    <fieldset aria-describedby={describedBy(id, { hint, error })} className="grid gap-1">
      <legend className="label mb-1">{label}</legend>
      <div className={`border-t border-rule ${className}`}>
        {choices.map((choice) => (
          <label
            key={choice.value}
            className="flex min-h-(--row) cursor-pointer items-center gap-3 border-b border-hair py-1 hover:bg-cord-wash has-checked:bg-cord-wash"
          >
            <input
              {...rest}
              type="radio"
              name={name}
              value={choice.value}
              {...(value === undefined ? {} : { checked: value === choice.value })}
              className="ml-2 size-5 shrink-0 accent-cord"
            />
            <span className="grid py-0.5">
              <span className="font-medium">{choice.words}</span>
              {choice.hint !== undefined && <span className="text-small text-ink-2">{choice.hint}</span>}
            </span>
          </label>
        ))}
      </div>
      <FieldError id={id} error={error} />
      {hint !== undefined && (
        <div id={`${id}-hint`} className="text-small text-ink-2">
          {hint}
        </div>
      )}
    </fieldset>
  )
}

/** One thing that is on or off, as a row whose whole width is the target. */
export function Checkbox({ label, hint, className = '', ...rest }: Omit<ComponentProps<'input'>, 'type'> & { readonly label: string; readonly hint?: string }) {
  return (
    <label className={`flex min-h-(--row) cursor-pointer items-center gap-3 py-1 ${className}`}>
      <input {...rest} type="checkbox" className="size-5 shrink-0 rounded-control accent-cord" />
      <span className="grid">
        <span>{label}</span>
        {hint !== undefined && <span className="text-small text-ink-2">{hint}</span>}
      </span>
    </label>
  )
}
