import type { KnotKind } from '#src/components/knots/knot.tsx'
import { Knot } from '#src/components/knots/knot.tsx'

const stages: readonly { readonly kind: KnotKind; readonly title: string; readonly words: string }[] = [
  { kind: 'start', title: 'What does it do?', words: 'The symptom as you reproduced it, not as it was told.' },
  { kind: 'check', title: 'Cheap and likely first', words: 'One check a page: what good looks like, what is off already.' },
  { kind: 'reading', title: 'Judged at once', words: 'A value against the spec sheet, in the unit you read.' },
  { kind: 'proof', title: 'Prove it', words: 'The suspect out of play, the same reading again. Nothing is bought before.' },
  { kind: 'cause', title: 'The cause, and what led to it', words: 'The fix, the service list, the hand-back run.' },
]

/** The job in five knots, for who opens the page for the first time. */
export function HowAWalkGoes() {
  return (
    <section aria-labelledby="how-a-walk-goes" className="max-w-md">
      <h2 id="how-a-walk-goes" className="label">
        How a walk goes
      </h2>
      <ol role="list" className="mt-4">
        {stages.map(({ kind, title, words }) => (
          <li key={kind} className="group relative lg:pl-11">
            {/* On a narrow page these knots hang on the page's own cord; beside the form they have a piece of their own. */}
            <span
              aria-hidden="true"
              className="absolute inset-y-0 left-3 hidden -translate-x-1/2 border-l-3 border-cord group-first:top-3 group-last:bottom-auto group-last:h-3 lg:block"
            />
            <span className="absolute top-3 left-[calc(var(--cord-x)-var(--cord-gutter))] flex -translate-1/2 lg:left-3">
              <Knot kind={kind} size={18} />
            </span>
            <div className="pb-6 group-last:pb-0">
              <p className="font-semibold">{title}</p>
              <p className="text-small text-ink-2">{words}</p>
            </div>
          </li>
        ))}
      </ol>
    </section>
  )
}
