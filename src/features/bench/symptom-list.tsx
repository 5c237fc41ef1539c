import { useRef } from 'react'
import { Link, useNavigate } from 'react-router-dom'

import type { Symptom } from '#shared/api/charts.ts'
import { equipmentClasses, equipmentClassWords } from '#shared/trade/equipment.ts'
import { Balloon } from '#src/components/knots/balloon.tsx'
import { paths } from '#src/lib/paths.ts'
import { useShortcut } from '#src/lib/shortcuts.ts'

type SymptomListProps = { readonly symptoms: readonly Symptom[]; readonly isSearch: boolean }

/** Symptoms with their balloons, in columns: the first nine answer to their number. */
export function SymptomList({ symptoms, isSearch }: SymptomListProps) {
  const list = useRef<HTMLUListElement>(null)
  return (
    <ul ref={list} role="list" className="grid gap-x-8 sm:grid-cols-2 xl:grid-cols-3">
      {symptoms.map((symptom, index) => (
        <li key={`${symptom.chartId}/${symptom.startId}`} className="border-b border-hair">
          <SymptomLink symptom={symptom} numeral={index < 9 ? index + 1 : null} isSearch={isSearch} />
        </li>
      ))}
    </ul>
  )
}

function SymptomLink({ symptom, numeral, isSearch }: { readonly symptom: Symptom; readonly numeral: number | null; readonly isSearch: boolean }) {
  const navigate = useNavigate()
  const to = paths.startWalk(symptom.chartId, symptom.startId)
  useShortcut(numeral === null ? null : String(numeral), symptom.title, () => void navigate(to))
  return (
    <Link to={to} data-symptom className="flex min-h-18 items-center gap-4 py-3 no-underline hover:bg-cord-wash">
      {numeral !== null && <Balloon numeral={numeral} />}
      <span className="grid min-w-0">
        <span className="text-[1.25rem] leading-7 font-medium">{symptom.title}</span>
        <span className="text-small leading-5 text-ink-2">{toHint(symptom, isSearch)}</span>
      </span>
    </Link>
  )
}

/** More machines than this are not all named. */
const mostNamed = 4

/** What tells this symptom from the others: the words that matched, its chart where that is called otherwise, the machines it is written for. */
function toHint({ matched, title, chartTitle, classes }: Symptom, isSearch: boolean): string {
  const named = classes.slice(0, classes.length > mostNamed ? mostNamed - 1 : mostNamed).map((name) => equipmentClassWords[name].toLowerCase())
  const machines =
    classes.length === 0 || classes.length === equipmentClasses.length
      ? 'any machine'
      : [...named, ...(classes.length > mostNamed ? ['others'] : [])].join(', ')
  return [isSearch && matched !== null ? `“${matched}”` : null, title === chartTitle ? null : chartTitle, machines].filter(Boolean).join(' · ')
}
