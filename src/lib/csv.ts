type Cell = string | number | null

/** One cell (RFC 4180). A text that a spreadsheet would run as a formula is led by an apostrophe, so that it stays a text. */
function toCell(cell: Cell): string {
  if (cell === null) return ''
  if (typeof cell === 'number') return String(cell)
  const text = /^[=+\-@\t\r]/.test(cell) ? `'${cell}` : cell
  return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text
}

export function toCsv(head: readonly string[], rows: readonly (readonly Cell[])[]): string {
  return [head, ...rows].map((row) => row.map(toCell).join(',')).join('\r\n') + '\r\n'
}

/** Hands a text to the browser as a file. The mark in front tells spreadsheets that it is UTF-8. */
export function downloadCsv(name: string, csv: string): void {
  const url = URL.createObjectURL(new Blob(['\ufeff', csv], { type: 'text/csv;charset=utf-8' }))
  const link = document.createElement('a')
  link.href = url
  link.download = name
  link.click()
  setTimeout(() => URL.revokeObjectURL(url), 10_000)
}
