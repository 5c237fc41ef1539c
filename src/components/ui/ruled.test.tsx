import { render, screen, within } from '@testing-library/react'
import { expect, test } from 'vitest'

import { RuledSection, RuledTable } from './ruled.tsx'
import { StateMark } from './state-mark.tsx'

const rows = [
  { id: 'a', name: 'Spark screen', count: 62 },
  { id: 'b', name: 'Stale fuel', count: 51 },
]

test('a ruled table is a table for ears: caption, column heads, row heads and cells', () => {
  render(
    <RuledTable
      caption="Causes"
      rows={rows}
      rowKey={({ id }) => id}
      columns={[
        { key: 'name', head: 'Cause', isRowHead: true, cell: ({ name }) => name },
        { key: 'count', head: 'Count', align: 'right', cell: ({ count }) => count },
        { key: 'acts', head: 'Acts', hidden: true, cell: () => <button type="button">Open</button> },
      ]}
      detail={({ id }) => (id === 'b' ? <p>Since spring</p> : null)}
    />,
  )
  const table = screen.getByRole('table', { name: 'Causes' })
  expect(
    within(table)
      .getAllByRole('columnheader')
      .map((head) => head.textContent),
  ).toEqual(['Cause', 'Count', 'Acts'])
  expect(within(table).getByRole('rowheader', { name: 'Stale fuel' })).toBeVisible()
  expect(within(table).getByRole('cell', { name: '51' })).toBeVisible()
  expect(within(table).getByText('Since spring')).toBeVisible()
})

test('a section is called by its heading; a state is said in words beside its shape', () => {
  render(
    <RuledSection title="My open walks" aside={<button type="button">Print</button>}>
      <StateMark state="bad">out of limits</StateMark>
    </RuledSection>,
  )
  const section = screen.getByRole('region', { name: 'My open walks' })
  expect(within(section).getByRole('heading', { level: 2 })).toHaveTextContent('My open walks')
  expect(within(section).getByText('out of limits')).toBeVisible()
})
