import { useEffect, useRef, useState } from 'react'

import { Button } from '#src/components/ui/button.tsx'
import { controlClass } from '#src/components/ui/field.tsx'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import { copyText } from '#src/lib/copy-text.ts'
import { formatMoment } from '#src/lib/format.ts'

export type HandedLink = { readonly name: string; readonly url: string; readonly expiresAt: string }

/** A one-time link, shown this once: the server keeps only its hash. */
export function LinkPanel({ link, onDone }: { readonly link: HandedLink; readonly onDone: () => void }) {
  const field = useRef<HTMLInputElement>(null)
  const heading = useRef<HTMLHeadingElement>(null)
  const [copied, setCopied] = useState<'yes' | 'no' | null>(null)

  useEffect(() => heading.current?.focus(), [link.url])

  const onCopy = async (): Promise<void> => {
    if (field.current !== null) setCopied((await copyText(field.current)) ? 'yes' : 'no')
  }

  return (
    <section aria-labelledby="one-time-link" className="grid gap-3 border-2 border-ink bg-card p-4 [--mark-ground:var(--card)]">
      <h2 id="one-time-link" ref={heading} tabIndex={-1} className="title">
        Hand this link to {link.name}
      </h2>
      <p className="max-w-words">
        It leads to the page where {link.name} sets a password. It works once, until {formatMoment(link.expiresAt)}, and is shown only now: it cannot be looked
        up later, but you can always make a new one.
      </p>
      <div className="grid gap-1">
        <label htmlFor="one-time-link-url" className="label">
          One-time link
        </label>
        <div className="flex flex-wrap gap-3">
          <input
            id="one-time-link-url"
            ref={field}
            readOnly
            value={link.url}
            onFocus={(event) => event.currentTarget.select()}
            className={`${controlClass} figures min-w-0 flex-[1_1_18rem] text-small`}
          />
          <Button look="primary" onClick={() => void onCopy()}>
            Copy the link
          </Button>
          <Button onClick={onDone}>I have handed it over</Button>
        </div>
        <p role="status" className="text-small empty:hidden">
          {copied === 'yes' && <StateMark state="good">copied</StateMark>}
          {copied === 'no' && <StateMark state="care">not copied: select the link and copy it by hand</StateMark>}
        </p>
      </div>
    </section>
  )
}
