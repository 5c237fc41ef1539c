import type { ReactNode } from 'react'

type KeypadProps = {
  /** The shop's decimal mark stands on its key. */
  readonly decimal: '.' | ','
  readonly onKey: (key: string) => void
  readonly onErase: () => void
  /** A key that the quantity needs beside the digits (a temperature below zero). */
  readonly hasMinus?: boolean
}

const digits = ['1', '2', '3', '4', '5', '6', '7', '8', '9'] as const

const keyClass =
  'flex min-h-14 items-center justify-center rounded-control md:min-h-16 border border-rule bg-card text-[1.75rem] leading-8 font-medium select-none hover:border-ink active:bg-cord-wash'

/** The player's own number pad: keys of 56 px, 64 px where there is room, for a thumb in a glove, so that no half-screen keyboard comes up. */
export function Keypad({ decimal, onKey, onErase, hasMinus = false }: KeypadProps) {
  return (
    <div role="group" aria-label="Number pad" className="grid grid-cols-3 gap-2">
      {digits.map((digit) => (
        <Key key={digit} onPress={() => onKey(digit)}>
          {digit}
        </Key>
      ))}
      {hasMinus ? (
        <span className="grid grid-cols-2 gap-2">
          <Key onPress={() => onKey('-')} words="minus">
            −
          </Key>
          <DecimalKey decimal={decimal} onKey={onKey} />
        </span>
      ) : (
        <DecimalKey decimal={decimal} onKey={onKey} />
      )}
      <Key onPress={() => onKey('0')}>0</Key>
      <Key onPress={onErase} words="Erase the last digit">
        <svg viewBox="0 0 32 24" aria-hidden="true" className="h-6 w-8">
          <path d="M10.5 3.5H29v17H10.5L2.5 12z M14.5 7.5l9 9 m0-9-9 9" fill="none" stroke="currentColor" strokeWidth="1.75" strokeLinejoin="round" />
        </svg>
      </Key>
    </div>
  )
}

function DecimalKey({ decimal, onKey }: Pick<KeypadProps, 'decimal' | 'onKey'>) {
  return (
    <Key onPress={() => onKey(decimal)} words={decimal === '.' ? 'decimal point' : 'decimal comma'}>
      {decimal}
    </Key>
  )
}

function Key({ onPress, words, children }: { readonly onPress: () => void; readonly words?: string; readonly children: ReactNode }) {
  return (
    <button
      type="button"
      aria-label={words}
      className={keyClass}
      // The value keeps the focus, so that keys and keyboard can be mixed.
      onPointerDown={(event) => event.preventDefault()}
      onClick={onPress}
    >
      {children}
    </button>
  )
}
