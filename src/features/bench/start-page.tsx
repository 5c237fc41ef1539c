import { useQuery } from '@tanstack/react-query'
import type { FormEvent, ReactNode } from 'react'
import { useId, useRef, useState } from 'react'
import { useNavigate } from 'react-router-dom'

import type { ChartVersion } from '#shared/api/charts.ts'
import type { MachineModel } from '#shared/api/models.ts'
import type { SignedIn } from '#shared/api/session.ts'
import { specLimitsFor } from '#shared/chart/spec-limits.ts'
import type { ChartId, EventId, ModelId, NodeId, WalkId } from '#shared/lib/ids.ts'
import type { EngineKind, EquipmentClass } from '#shared/trade/equipment.ts'
import { engineKinds, engineKindWords, equipmentClasses, equipmentClassWords } from '#shared/trade/equipment.ts'
import type { EventOf, Machine } from '#shared/walk/events.ts'
import type { Pins } from '#shared/walk/pinned-charts.ts'
import type { RefusalCode } from '#shared/walk/refusals.ts'
import { refusalWords } from '#shared/walk/refusals.ts'
import { chartQueries } from '#src/api/charts.ts'
import { modelQueries } from '#src/api/models.ts'
import { postWalk } from '#src/api/walks.ts'
import { Button } from '#src/components/ui/button.tsx'
import { SelectField, TextField } from '#src/components/ui/field.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { Placeholder } from '#src/components/ui/placeholder.tsx'
import { RuledSection } from '#src/components/ui/ruled.tsx'
import { readLastMachine, writeLastMachine } from '#src/features/bench/last-machine.ts'
import { getDeviceId, newId } from '#src/lib/device.ts'
import { paths } from '#src/lib/paths.ts'
import { toWords } from '#src/lib/problem-words.ts'

type StartPageProps = { readonly chartId: ChartId; readonly startId: NodeId | null; readonly person: SignedIn }

/** The machine of a new walk, on one page with sensible answers already given: a second tap starts it. */
export function StartPage({ chartId, startId, person }: StartPageProps) {
  const reach = useQuery(chartQueries.reach(chartId))
  const models = useQuery(modelQueries.list())
  if (reach.isPending || models.isPending) return <Placeholder words="Reading the chart" />
  const error = reach.error ?? models.error
  if (error !== null) {
    return (
      <Notice state="bad" title="The chart could not be read" className="mt-6">
        {toWords(error)}
      </Notice>
    )
  }
  const own = reach.data?.charts.find((chart) => chart.chartId === chartId)
  if (own === undefined || reach.data === undefined || models.data === undefined) {
    return (
      <Notice state="care" title="This chart is not on the bench" className="mt-6">
        It may have been taken off. Go back and pick the symptom again.
      </Notice>
    )
  }
  return <StartForm own={own} charts={reach.data.charts} models={models.data.models} startId={startId} person={person} />
}

type StartFormProps = {
  readonly own: ChartVersion
  readonly charts: readonly ChartVersion[]
  readonly models: readonly MachineModel[]
  readonly startId: NodeId | null
  readonly person: SignedIn
}

function StartForm({ own, charts, models, startId, person }: StartFormProps) {
  const { document } = own
  const starts = document.nodes.filter(({ kind }) => kind === 'start')
  const start = starts.find(({ id }) => id === startId) ?? starts[0]
  const classes = document.appliesTo?.classes?.length ? document.appliesTo.classes : equipmentClasses
  const engines = document.appliesTo?.engines?.length ? document.appliesTo.engines : engineKinds
  const [last] = useState(readLastMachine)
  const [machineClass, setClass] = useState<EquipmentClass>(() => classes.find((name) => name === last?.class) ?? classes[0] ?? 'other')
  const [engine, setEngine] = useState<EngineKind>(() => engines.find((name) => name === last?.engine) ?? engines[0] ?? 'two-stroke')
  const [modelId, setModelId] = useState<ModelId | null>(null)
  const [serial, setSerial] = useState('')
  const { start: begin, isStarting, problem } = useStart(own, charts, person)

  const fitting = models.filter((model) => model.class === machineClass && model.engine === engine)
  const model = fitting.find(({ id }) => id === modelId) ?? null
  const machine: Machine = {
    class: machineClass,
    engine,
    ...(model === null ? {} : { modelId: model.id }),
    ...(serial.trim() === '' ? {} : { serial: serial.trim().slice(0, 100) }),
  }
  const submit = (event: FormEvent): void => {
    event.preventDefault()
    if (start !== undefined) void begin(start.id, machine, model)
  }
  return (
    <form
      onSubmit={submit}
      className="mx-auto grid w-full max-w-sheet gap-x-16 gap-y-5 pt-4 pb-6 md:gap-y-8 md:pt-8 lg:grid-cols-[minmax(0,7fr)_minmax(0,5fr)]"
    >
      <div className="grid content-start gap-4 md:gap-8">
        <p className="text-small text-ink-2">
          {document.title}, version {own.version}
        </p>
        <ChoiceGrid
          legend="Machine"
          name="class"
          choices={classes.map((value) => ({ value, words: equipmentClassWords[value] }))}
          value={machineClass}
          onChange={setClass}
        />
        {engines.length > 1 && (
          <ChoiceGrid
            legend="Engine"
            name="engine"
            choices={engines.map((value) => ({ value, words: engineKindWords[value] }))}
            value={engine}
            onChange={setEngine}
          />
        )}
      </div>
      <div className="flex flex-col gap-5 md:gap-8">
        <RuledSection title="If you know it">
          <div className="grid gap-3 pt-3 md:gap-5 md:pt-4">
            <SelectField<string>
              label="Model, for its spec sheet"
              value={model?.id ?? ''}
              choices={[
                { value: '', words: fitting.length === 0 ? 'No spec sheet for this kind' : 'Not known' },
                ...fitting.map(({ id, maker, name }) => ({ value: id, words: `${maker} ${name}` })),
              ]}
              hint={model === null ? 'Else readings go by general values.' : 'Readings go by this model’s own values.'}
              onChange={(event) => setModelId(fitting.find(({ id }) => id === event.target.value)?.id ?? null)}
            />
            <TextField
              label="Serial number"
              value={serial}
              onChange={(event) => setSerial(event.target.value)}
              maxLength={100}
              autoComplete="off"
              autoCapitalize="characters"
              className="figures"
            />
          </div>
        </RuledSection>
        <div className="mt-auto grid gap-3">
          {problem !== null && (
            <Notice state="bad" title="Not started" role="alert">
              {problem}
            </Notice>
          )}
          <Button type="submit" look="primary" size="large" busy={isStarting && 'Starting'} className="min-h-18 w-full text-[1.375rem] md:min-h-22">
            Start
          </Button>
          <p className="text-small text-ink-2 max-md:hidden">
            First the cautions, then the first check. The maker’s manual, local codes and licensed practice come first.
          </p>
        </div>
      </div>
    </form>
  )
}

/** Starts the walk. The same machine tried again is the same walk: an answer that was lost starts nothing twice. */
function useStart(own: ChartVersion, charts: readonly ChartVersion[], person: SignedIn) {
  const navigate = useNavigate()
  const [isStarting, setStarting] = useState(false)
  const [problem, setProblem] = useState<string | null>(null)
  const tried = useRef<{ readonly key: string; readonly event: EventOf<'started'> } | null>(null)

  const start = async (startId: NodeId, machine: Machine, model: MachineModel | null): Promise<void> => {
    const key = JSON.stringify([startId, machine])
    const event = tried.current?.key === key ? tried.current.event : toStarted(own, charts, person, startId, machine, model)
    tried.current = { key, event }
    setStarting(true)
    setProblem(null)
    try {
      const [result] = (await postWalk(event)).results
      if (result?.status === 'appended' || result?.status === 'duplicate') {
        writeLastMachine(machine)
        await navigate(paths.walk(event.walkId))
        return
      }
      tried.current = null
      setProblem(toRefusalWords(result?.code))
    } catch (error) {
      setProblem(toWords(error))
    }
    setStarting(false)
  }
  return { start, isStarting, problem }
}

function toRefusalWords(code: string | undefined): string {
  return code !== undefined && Object.hasOwn(refusalWords, code)
    ? refusalWords[code as RefusalCode]
    : 'The server did not take it. Load the page again and start once more.'
}

function toStarted(
  own: ChartVersion,
  charts: readonly ChartVersion[],
  person: SignedIn,
  startId: NodeId,
  machine: Machine,
  model: MachineModel | null,
): EventOf<'started'> {
  // Both made by newId, UUIDs.
  const walkId = newId() as WalkId
  const id = newId() as EventId
  return {
    id,
    walkId,
    seq: 1,
    at: new Date().toISOString(),
    deviceId: getDeviceId(),
    personId: person.id,
    type: 'started',
    payload: {
      kind: 'bench',
      chartId: own.chartId,
      startId,
      pins: Object.fromEntries(charts.map(({ chartId, version }) => [chartId, version])) as Pins,
      machine,
      limits: specLimitsFor(
        charts.map(({ document }) => document),
        machine,
        model?.limits ?? null,
      ),
    },
  }
}

type ChoiceGridProps<Value extends string> = {
  readonly legend: string
  readonly name: string
  readonly choices: readonly { readonly value: Value; readonly words: ReactNode }[]
  readonly value: Value
  readonly onChange: (value: Value) => void
}

/** One of a few, each a field as large as a thumb. */
function ChoiceGrid<Value extends string>({ legend, name, choices, value, onChange }: ChoiceGridProps<Value>) {
  const id = useId()
  return (
    <fieldset aria-labelledby={id}>
      <legend id={id} className="label mb-2 w-full border-b border-rule pb-1">
        {legend}
      </legend>
      <div className="grid grid-cols-2 gap-2 sm:gap-3 md:grid-cols-3">
        {choices.map((choice) => (
          <label
            key={choice.value}
            className="flex min-h-14 cursor-pointer md:min-h-16 items-center gap-3 rounded-control border border-rule bg-card px-4 py-2 text-[1.125rem] leading-6 hover:border-ink has-checked:border-cord has-checked:bg-cord-wash has-checked:font-semibold has-checked:outline-1 has-checked:outline-cord has-focus-visible:outline-3 has-focus-visible:outline-offset-2 has-focus-visible:outline-focus"
          >
            <input
              type="radio"
              name={name}
              value={choice.value}
              checked={choice.value === value}
              onChange={() => onChange(choice.value)}
              className="size-5 shrink-0 accent-cord"
            />
            {choice.words}
          </label>
        ))}
      </div>
    </fieldset>
  )
}
