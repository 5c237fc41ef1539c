import { useEffect, useState } from 'react'

import type { NodeWords } from '#shared/walk/page.ts'
import { Button } from '#src/components/ui/button.tsx'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import { announce } from '#src/lib/announce.ts'
import { formatSeconds } from '#src/lib/format.ts'

type Run = { readonly startedAt: number; readonly stoppedAt: number | null }

/** Whole seconds run so far; counts while `isRunning`. */
function useSeconds(run: Run | null): number {
  const [now, setNow] = useState(() => performance.now())
  const isRunning = run !== null && run.stoppedAt === null
  useEffect(() => {
    if (!isRunning) return
    const timer = setInterval(() => setNow(performance.now()), 200)
    return () => clearInterval(timer)
  }, [isRunning])
  return run === null ? 0 : Math.max(0, ((run.stoppedAt ?? now) - run.startedAt) / 1000)
}

/** The timer of a node: says first what it is for, and when the time was missed what to do about it. Recording never waits for it. */
export function Timer({ timer }: { readonly timer: NonNullable<NodeWords['timer']> }) {
  const [run, setRun] = useState<Run | null>(null)
  const seconds = useSeconds(run)
  const isAtMost = timer.rule === 'at-most'
  const isReached = seconds >= timer.seconds
  const isRunning = run !== null && run.stoppedAt === null
  const isMissed = isAtMost ? isReached : run?.stoppedAt != null && !isReached

  useEffect(() => {
    if (isReached) announce(isAtMost ? 'Time is up: stop.' : 'Time is up: long enough.')
  }, [isReached, isAtMost])

  const toggle = (): void => {
    const now = performance.now()
    setRun((old) => (old === null || old.stoppedAt !== null ? { startedAt: now, stoppedAt: null } : { ...old, stoppedAt: now }))
  }

  return (
    <div role="group" aria-label="Timer" className="mt-3 grid gap-1 border-y border-hair py-1">
      <div className="flex items-center gap-4">
        <Button onClick={toggle} className="min-w-28">
          {isRunning ? 'Stop' : run === null ? 'Start' : 'Again'}
        </Button>
        <p className="grid">
          <span className="label">{isAtMost ? `${formatLength(timer.seconds)} at most` : `${formatLength(timer.seconds)} at least`}</span>
          <span className="figures text-[1.625rem] leading-8 font-medium">
            {formatSeconds(Math.floor(seconds))}
            <span className="text-ink-2"> / {formatSeconds(timer.seconds)}</span>
          </span>
        </p>
        <span aria-hidden="true" className="relative hidden h-3 min-w-0 flex-1 border border-rule sm:block">
          <span
            className={`absolute inset-y-0 left-0 ${isMissed ? 'bg-bad' : 'bg-cord'}`}
            style={{ width: `${Math.min(1, seconds / timer.seconds) * 100}%` }}
          />
        </span>
      </div>
      {isAtMost && isReached && isRunning && <StateMark state="bad">Time is up: stop.</StateMark>}
      {!isAtMost && isReached && <StateMark state="good">Long enough.</StateMark>}
      {isMissed && !isRunning && (
        <StateMark state="care">
          {timer.missed ?? (isAtMost ? 'That was longer than it may run. Let it cool, then do it again.' : 'That was too short. Do it again.')}
        </StateMark>
      )}
    </div>
  )
}

function formatLength(seconds: number): string {
  if (seconds < 120) return `${seconds}\u00a0s`
  return seconds % 60 === 0 ? `${seconds / 60}\u00a0min` : `${Math.floor(seconds / 60)}\u00a0min ${seconds % 60}\u00a0s`
}
