import { useEffect, useRef } from 'react'

import { useShortcut } from '#src/lib/shortcuts.ts'

type SymptomSearchProps = { readonly words: string; readonly onWords: (words: string) => void }

/** "What does it do?": the first question of the bench. `/` or Ctrl K brings the keyboard here, Enter opens the first symptom found. */
export function SymptomSearch({ words, onWords }: SymptomSearchProps) {
  const field = useRef<HTMLInputElement>(null)
  useShortcut('/', 'What does it do?', () => field.current?.focus())
  useEffect(() => {
    const onKey = (event: KeyboardEvent): void => {
      if (!(event.ctrlKey || event.metaKey) || event.key.toLowerCase() !== 'k') return
      event.preventDefault()
      field.current?.focus()
    }
    document.addEventListener('keydown', onKey)
    return () => document.removeEventListener('keydown', onKey)
  }, [])
  const toFirst = (): void => document.querySelector<HTMLAnchorElement>('[data-symptom]')?.focus()
  return (
    <form
      role="search"
      className="relative"
      onSubmit={(event) => {
        event.preventDefault()
        document.querySelector<HTMLAnchorElement>('[data-symptom]')?.click()
      }}
    >
      <input
        ref={field}
        type="search"
        aria-label="What does it do?"
        placeholder="What does it do?"
        autoComplete="off"
        enterKeyHint="go"
        value={words}
        onChange={(event) => onWords(event.target.value.slice(0, 200))}
        onKeyDown={(event) => {
          if (event.key === 'ArrowDown') {
            event.preventDefault()
            toFirst()
          } else if (event.key === 'Escape') {
            if (words === '') field.current?.blur()
            else onWords('')
          }
        }}
        className="h-18 w-full rounded-control border-2 border-ink bg-card pr-4 pl-4 sm:pr-24 sm:pl-5 text-[1.375rem] placeholder:text-ink-2 md:h-20"
      />
      <kbd aria-hidden="true" className="figures pointer-events-none absolute inset-y-0 right-5 hidden items-center text-small text-ink-2 sm:flex">
        {words === '' ? '/' : ''}
      </kbd>
    </form>
  )
}
