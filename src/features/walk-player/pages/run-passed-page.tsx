import type { RunPassedPage as Page } from '#shared/walk/page.ts'
import { formatNumber, formatValue } from '#shared/units/format-value.ts'
import { handBackRun } from '#shared/trade/hand-back-run.ts'
import { RuledPairs } from '#src/components/ui/ruled.tsx'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import { CloseActs } from '#src/features/walk-player/parts/close-acts.tsx'
import { PageHead, Sheet } from '#src/features/walk-player/parts/page-parts.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { formatMinutes } from '#src/lib/format.ts'

/** The run is passed: one look at what was found and done, then the walk is closed. */
export function RunPassedPage({ page }: { readonly page: Page }) {
  const { walk, format } = usePlayer()
  const led = page.contributing.filter(({ isSet }) => isSet).map(({ title }) => title)
  const titles = new Map(handBackRun(walk.machine.class).map(({ id, title }) => [id, title]))
  const readings = page.run.flatMap(({ id, value, unit }) =>
    value === undefined || unit === undefined ? [] : [`${titles.get(id) ?? id}: ${formatValue(value, unit, format)}`],
  )
  const parts = page.repair.partsUsed.map(({ title, quantity }) => `${title}, ${formatNumber(quantity, format)}\u00a0×`)
  return (
    <Sheet
      what={
        <>
          <PageHead knot="proof" over={['Hand-back run']} title="It runs right" />
          <p className="mt-2">
            <StateMark state="good">run passed</StateMark>
          </p>
          <RuledPairs
            className="mt-5"
            pairs={[
              { name: 'Cause', value: page.cause.title },
              ...(led.length === 0 ? [] : [{ name: 'What led to it', value: led.join(', ') }]),
              ...(parts.length === 0 ? [] : [{ name: 'Parts', value: parts.join('; ') }]),
              { name: 'The fix took', value: formatMinutes(page.repair.minutes) },
              ...(readings.length === 0 ? [] : [{ name: 'Readings', value: readings.join('; ') }]),
              { name: 'Minutes used', value: formatMinutes(walk.minutesUsed) },
            ]}
          />
        </>
      }
      answers={<CloseActs results={page.results} withNote={false} />}
    />
  )
}
