import { useId, useState } from 'react'

import { StateShape } from '#src/components/ui/state-mark.tsx'

type DemoBannerProps = {
  /** Among the controls of a check, where a thumb could land on it: the words alone. */
  readonly isAtCheck?: boolean
}

/** On every page of the demo shop: says so, and how to leave it for a shop of one's own. */
export function DemoBanner({ isAtCheck = false }: DemoBannerProps) {
  const id = useId()
  const [isOpen, setOpen] = useState(false)
  return (
    <aside aria-label="Demo shop" data-screen-only className="corded border-b border-hair bg-well text-small [--mark-ground:var(--well)]">
      <p className="flex min-h-8 items-center gap-x-2">
        <StateShape state="info" className="size-3.5 text-info" />
        <span>{isAtCheck ? 'Demo shop: start your own from the bench' : 'Demo shop:'}</span>
        {!isAtCheck && (
          <button
            type="button"
            aria-expanded={isOpen}
            aria-controls={id}
            onClick={() => setOpen((open) => !open)}
            className="min-h-8 font-medium text-cord underline underline-offset-4"
          >
            start your own
          </button>
        )}
      </p>
      <p id={id} hidden={!isOpen} className="max-w-words pb-2">
        Stop this server, then start it with a folder of your own: <code className="figures">DEMO=0 PULLCORD_DATA=./shop npm start</code>. It prints a one-time
        code for the first owner. The demo stays where it is.
      </p>
    </aside>
  )
}
