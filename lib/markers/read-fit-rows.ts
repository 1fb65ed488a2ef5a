import { parseDecimal } from '@/lib/format'
import { mostResults } from '@/lib/markers/schema'
import type { AssayValue } from '@/lib/markers/read-assay-value'
import { readAssayValue } from '@/lib/markers/read-assay-value'
import { isValid37_36 } from '@/lib/science/identifier'

/** One pasted row: what it was typed as, and a barrel or a dose with its result, or what is wrong. */
export type TypedRow = {
  line: number
  typedSource: string
  typedValue: string
} & ({ error: string } | { error: null; source: { serial: string } | { doseMin: number }; value: AssayValue })

/** Two cells: by a tab, a semicolon, or the first space. */
function cellsOf(line: string): string[] {
  for (const mark of ['\t', ';']) {
    if (!line.includes(mark)) continue
    const cells = line.split(mark).map((cell) => cell.trim())
    while (cells.length > 2 && cells.at(-1) === '') cells.pop()
    return cells
  }
  const parted = /^(\S+)\s+(.+)$/.exec(line.trim())
  return parted === null ? [line.trim()] : [parted[1] ?? '', parted[2] ?? '']
}

/** Letters and digits of a serial, without hyphens, as they are compared. */
export function plainSerial(serial: string): string {
  return serial.replaceAll(/[-\s]/g, '').toUpperCase()
}

function readSource(typed: string): { serial: string } | { doseMin: number } | { error: string } {
  if (typed === '') return { error: 'There is no barrel or dose in this row.' }
  const doseMin = parseDecimal(typed.replace(/\s*min$/i, ''))
  if (doseMin !== null) {
    return doseMin >= 0 && doseMin <= 100_000 ? { doseMin } : { error: 'A dose lies from 0 to 100,000 min.' }
  }
  const serial = plainSerial(typed)
  if (/^[A-Z]{2,5}\d{4,}[0-9A-Z]$/.test(serial)) {
    return isValid37_36(serial)
      ? { serial }
      : { error: `The check character of ${typed} does not fit: look at the serial again.` }
  }
  return { error: `“${typed}” is neither a barrel’s serial nor a dose in minutes.` }
}

/** A first line of words is the head of the table. */
function isHead(cells: readonly string[]): boolean {
  return cells.length >= 2 && cells.every((cell) => !/\d/.test(cell))
}

/**
 * Rows as pasted from a spreadsheet: barrel serial or dose in minutes, then the result. Empty lines and a head are
 * passed over; every other line is a row, with an error when it cannot be read.
 */
export function readFitRows(text: string): { rows: TypedRow[]; tooMany: boolean } {
  const rows: TypedRow[] = []
  for (const [index, line] of text.split(/\r?\n/).entries()) {
    if (line.trim() === '') continue
    const cells = cellsOf(line)
    if (rows.length === 0 && isHead(cells)) continue
    if (rows.length === mostResults) return { rows, tooMany: true }
    rows.push(readRow(index + 1, cells))
  }
  return { rows: withTwins(rows), tooMany: false }
}

function readRow(line: number, cells: readonly string[]): TypedRow {
  const [typedSource = '', typedValue = ''] = cells
  const typed = { line, typedSource, typedValue }
  if (cells.length !== 2) {
    const found = cells.length === 1 ? 'one column' : `${cells.length} columns`
    return {
      ...typed,
      error: `Two columns are needed, barrel or dose and result; here ${found === 'one column' ? 'is' : 'are'} ${found}.`,
    }
  }
  const source = readSource(typedSource)
  if ('error' in source) return { ...typed, error: source.error }
  const value = readAssayValue(typedValue)
  return 'error' in value ? { ...typed, error: value.error } : { ...typed, error: null, source, value }
}

/** A barrel counts once: two results of one barrel are no two barrels. */
function withTwins(rows: readonly TypedRow[]): TypedRow[] {
  const firstLines = new Map<string, number>()
  return rows.map((row) => {
    if (row.error !== null || !('serial' in row.source)) return row
    const first = firstLines.get(row.source.serial)
    if (first === undefined) {
      firstLines.set(row.source.serial, row.line)
      return row
    }
    const { line, typedSource, typedValue } = row
    const error = `This barrel stands in line ${first} already. Give one result a barrel: the mean of its repeats.`
    return { line, typedSource, typedValue, error }
  })
}
