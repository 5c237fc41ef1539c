import { useQuery } from '@tanstack/react-query'
import { useState } from 'react'

import { specLimitsFor } from '#shared/chart/spec-limits.ts'
import type { ModelId } from '#shared/lib/ids.ts'
import type { Machine } from '#shared/walk/events.ts'
import { modelQueries } from '#src/api/models.ts'
import { Button } from '#src/components/ui/button.tsx'
import { SelectField, TextField } from '#src/components/ui/field.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { Placeholder } from '#src/components/ui/placeholder.tsx'
import { Panel } from '#src/features/walk-player/panels/panel.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { toWords } from '#src/lib/problem-words.ts'

/** What was not known at the start: model and serial. Later readings are judged by the model's own values. */
export function MachinePanel() {
  const { walk, versions, record, closePanel, tap, machineTitle } = usePlayer()
  const { data, error } = useQuery(modelQueries.list())
  const [modelId, setModelId] = useState<ModelId | null>(walk.machine.modelId ?? null)
  const [serial, setSerial] = useState(walk.machine.serial ?? '')
  const fitting = (data?.models ?? []).filter((model) => model.class === walk.machine.class && model.engine === walk.machine.engine)
  const model = fitting.find(({ id }) => id === modelId) ?? null
  const save = (): void => {
    const { class: machineClass, engine, ticketId } = walk.machine
    const machine: Machine = {
      class: machineClass,
      engine,
      ...(ticketId === undefined ? {} : { ticketId }),
      ...(model === null ? {} : { modelId: model.id }),
      ...(serial.trim() === '' ? {} : { serial: serial.trim() }),
    }
    const documents = versions.map(({ document }) => document)
    if (record([{ type: 'machine-identified', payload: { machine, limits: specLimitsFor(documents, machine, model?.limits ?? null) } }], 'Machine noted.'))
      closePanel()
  }
  return (
    <Panel title="Model and serial number" over={machineTitle}>
      {data === undefined && error === null && <Placeholder words="Reading the spec sheets" rows={1} />}
      {error !== null && (
        <Notice state="care" title="The spec sheets could not be read">
          {toWords(error)}
        </Notice>
      )}
      {data !== undefined && (
        <SelectField<string>
          label="Model, for its spec sheet"
          value={model?.id ?? ''}
          choices={[
            { value: '', words: fitting.length === 0 ? 'No spec sheet for this kind' : 'Not known' },
            ...fitting.map(({ id, maker, name }) => ({ value: id, words: `${maker} ${name}` })),
          ]}
          hint="Readings from now on go by this model’s own values; what was found before stays as it is."
          onChange={(event) => setModelId(fitting.find(({ id }) => id === event.target.value)?.id ?? null)}
        />
      )}
      <TextField
        label="Serial number"
        value={serial}
        onChange={(event) => setSerial(event.target.value)}
        maxLength={100}
        autoComplete="off"
        autoCapitalize="characters"
        className="figures"
      />
      <Button look="primary" size="large" onClick={() => tap(save)} className="justify-self-start">
        Keep it
      </Button>
    </Panel>
  )
}
