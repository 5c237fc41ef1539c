import type { ComponentProps, ReactNode } from 'react'
import { Fragment, useId } from 'react'

type RuledSectionProps = {
  readonly title: string
  /** What stands at the right end of the heading's line. */
  readonly aside?: ReactNode
  readonly children: ReactNode
  readonly className?: string
}

/** A section: condensed capitals on a rule, then what belongs to it. */
export function RuledSection({ title, aside, children, className = '' }: RuledSectionProps) {
  const id = useId()
  return (
    <section aria-labelledby={id} className={className}>
      <div className="flex flex-wrap items-end justify-between gap-x-4 gap-y-1 border-b border-rule pb-2">
        <h2 id={id} className="label">
          {title}
        </h2>
        {aside}
      </div>
      {children}
    </section>
  )
}

/** Rows between hairlines. */
export function RuledList({ className = '', ...rest }: ComponentProps<'ul'>) {
  // Safari forgets that a list without bullets is one, unless told.
  return <ul role="list" {...rest} className={`[&>li]:border-b [&>li]:border-hair ${className}`} />
}

/** A row; `relative`, so that a `Tie` or a `Branch` finds its place on the cord. */
export function RuledRow({ className = '', ...rest }: ComponentProps<'li'>) {
  return <li {...rest} className={`relative min-h-(--row) py-2 ${className}`} />
}

/** Name and value in two columns, as in a parts list; the columns stack where the page is narrow. */
export function RuledPairs({
  pairs,
  className = '',
}: {
  readonly pairs: readonly { readonly name: string; readonly value: ReactNode }[]
  readonly className?: string
}) {
  return (
    <dl className={`border-t border-rule ${className}`}>
      {pairs.map(({ name, value }) => (
        <div key={name} className="grid gap-x-4 border-b border-hair py-2 sm:grid-cols-[10rem_1fr]">
          <dt className="label sm:pt-1">{name}</dt>
          <dd>{value}</dd>
        </div>
      ))}
    </dl>
  )
}

export type RuledColumn<Row> = {
  readonly key: string
  /** Head of the column; `hidden` keeps it for ears alone (a column of buttons). */
  readonly head: string
  readonly hidden?: boolean
  /** Figures stand to the right. */
  readonly align?: 'right'
  readonly cell: (row: Row) => ReactNode
  /** The cell that names its row. */
  readonly isRowHead?: boolean
  readonly className?: string
}

type RuledTableProps<Row> = {
  /** What the table shows, for ears; the section's heading says it to eyes. */
  readonly caption: string
  readonly columns: readonly RuledColumn<Row>[]
  readonly rows: readonly Row[]
  readonly rowKey: (row: Row) => string
  readonly rowClassName?: (row: Row) => string
  /** What opens below a row (its form); `null` while it is closed. */
  readonly detail?: (row: Row) => ReactNode
}

/**
 * A table that turns into stacked rows where it has no room, each cell led by its column's head. The roles are spelt out because
 * a table that is displayed otherwise loses them in some browsers.
 */
export function RuledTable<Row>({ caption, columns, rows, rowKey, rowClassName, detail }: RuledTableProps<Row>) {
  return (
    <div className="@container">
      <table role="table" className="block w-full border-collapse roomy:table">
        <caption className="for-ears">{caption}</caption>
        <thead role="rowgroup" className="hidden roomy:table-header-group">
          <tr role="row">
            {columns.map((column) => (
              <th
                key={column.key}
                role="columnheader"
                scope="col"
                className={`label border-b border-rule py-2 pr-4 last:pr-0 ${column.align === 'right' ? 'text-right' : 'text-left'}`}
              >
                {column.hidden === true ? <span className="for-ears">{column.head}</span> : column.head}
              </th>
            ))}
          </tr>
        </thead>
        <tbody role="rowgroup" className="block roomy:table-row-group">
          {rows.map((row) => {
            const opened = detail?.(row) ?? null
            return (
              <Fragment key={rowKey(row)}>
                <tr
                  role="row"
                  className={`block border-hair py-3 roomy:table-row roomy:py-0 ${opened === null ? 'border-b' : ''} ${rowClassName?.(row) ?? ''}`}
                >
                  {columns.map((column) => (
                    <RuledCell key={column.key} column={column} row={row} />
                  ))}
                </tr>
                {opened !== null && (
                  <tr role="row" className="block border-b border-rule roomy:table-row">
                    <td role="cell" colSpan={columns.length} className="block roomy:table-cell">
                      {opened}
                    </td>
                  </tr>
                )}
              </Fragment>
            )
          })}
        </tbody>
      </table>
    </div>
  )
}

/** On a phone: its head on the left, what it holds on the right. */
function RuledCell<Row>({ column, row }: { readonly column: RuledColumn<Row>; readonly row: Row }) {
  const className = `py-0.5 roomy:table-cell roomy:h-(--row) roomy:py-1.5 roomy:pr-4 roomy:align-middle roomy:last:pr-0 ${column.align === 'right' ? 'roomy:text-right' : 'text-left'} ${column.className ?? ''}`
  const content = column.cell(row)
  if (column.isRowHead === true) {
    return (
      <th role="rowheader" scope="row" className={`block ${className} font-semibold`}>
        {content}
      </th>
    )
  }
  return (
    <td role="cell" className={`${className} ${column.hidden === true ? 'block pt-2!' : 'flex flex-wrap items-baseline gap-x-3'} empty:hidden roomy:pt-1.5!`}>
      {column.hidden !== true && (
        <span aria-hidden="true" className="label shrink-0 basis-26 roomy:hidden">
          {column.head}
        </span>
      )}
      {content !== null && <div className="min-w-0 flex-[1_1_9rem]">{content}</div>}
    </td>
  )
}
