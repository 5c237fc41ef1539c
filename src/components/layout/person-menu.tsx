import type { KeyboardEvent } from 'react'
import { useEffect, useId, useRef, useState } from 'react'

import { Button } from '#src/components/ui/button.tsx'
import { Checkbox, SelectField } from '#src/components/ui/field.tsx'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import { TextLink } from '#src/components/ui/text-link.tsx'
import { paths } from '#src/lib/paths.ts'
import { setShortcutsOn, useAreShortcutsOn } from '#src/lib/shortcuts.ts'
import type { Theme } from '#src/lib/theme.ts'
import { setTheme, themes, themeWords, useTheme } from '#src/lib/theme.ts'

import { roleWords } from './role-words.ts'
import { useShell } from './shell-context.ts'

/** Who is signed in, what they may set for this browser, and the way out. A panel that opens and closes, not a menu of commands. */
export function PersonMenu() {
  const { person, onSignOut, signOutProblem } = useShell()
  const id = useId()
  const [isOpen, setOpen] = useState(false)
  const frame = useRef<HTMLDivElement>(null)
  const button = useRef<HTMLButtonElement>(null)

  useEffect(() => {
    if (!isOpen) return
    const onOutside = (event: Event): void => {
      if (event.target instanceof Node && frame.current?.contains(event.target) === false) setOpen(false)
    }
    document.addEventListener('pointerdown', onOutside)
    document.addEventListener('focusin', onOutside)
    return () => {
      document.removeEventListener('pointerdown', onOutside)
      document.removeEventListener('focusin', onOutside)
    }
  }, [isOpen])

  const onKeyDown = (event: KeyboardEvent): void => {
    if (event.key !== 'Escape' || !isOpen) return
    setOpen(false)
    button.current?.focus()
  }

  return (
    <div ref={frame} onKeyDown={onKeyDown} className="flex items-center sm:relative">
      <button
        ref={button}
        type="button"
        aria-expanded={isOpen}
        aria-controls={id}
        onClick={() => setOpen((open) => !open)}
        className="flex min-h-11 items-center gap-2 font-medium hover:underline hover:underline-offset-4"
      >
        {toShortName(person.name)}
        <Caret isOpen={isOpen} />
      </button>
      <div
        id={id}
        hidden={!isOpen}
        data-mode="desk"
        className="absolute top-(--bar-height) right-(--page-edge) left-(--cord-gutter) z-10 -mt-1 border border-rule bg-card p-4 sm:top-full sm:right-0 sm:left-auto sm:mt-0 sm:w-72"
      >
        <p className="font-semibold">{person.name}</p>
        <p className="text-small text-ink-2">{roleWords[person.role]}</p>
        <Settings />
        <div className="mt-2 grid gap-3 border-t border-hair pt-3">
          <TextLink to={paths.account()} className="justify-self-start py-1" onClick={() => setOpen(false)}>
            Your account
          </TextLink>
          <Button onClick={onSignOut} className="w-full">
            Sign out
          </Button>
          {signOutProblem !== null && (
            <p role="alert" className="text-small">
              <StateMark state="bad">{signOutProblem}</StateMark>
            </p>
          )}
        </div>
      </div>
    </div>
  )
}

function Settings() {
  const theme = useTheme()
  const areKeysOn = useAreShortcutsOn()
  return (
    <div className="mt-3 grid gap-2 border-t border-hair pt-3">
      <SelectField
        label="Theme"
        value={theme}
        choices={themes.map((value) => ({ value, words: themeWords[value] }))}
        // The choices are the themes and nothing else.
        onChange={(event) => setTheme(event.target.value as Theme)}
      />
      <Checkbox
        label="Single-key shortcuts"
        hint="1 to 9, 0 and letters act at once"
        checked={areKeysOn}
        onChange={(event) => setShortcutsOn(event.target.checked)}
      />
    </div>
  )
}

function Caret({ isOpen }: { readonly isOpen: boolean }) {
  return (
    <svg viewBox="0 0 12 8" aria-hidden="true" className={`w-2.5 ${isOpen ? 'rotate-180' : ''}`}>
      <path d="M1 1.5 6 6.5 11 1.5" fill="none" stroke="currentColor" strokeWidth="1.75" />
    </svg>
  )
}

/** 'Mara Kessler' -> 'Mara K.'; a single name stays as it is. */
export function toShortName(name: string): string {
  const [first = '', ...rest] = name.trim().split(/\s+/)
  const last = rest.at(-1)
  return last === undefined ? first : `${first} ${[...last][0] ?? ''}.`
}
