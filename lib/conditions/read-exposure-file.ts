import { tz } from '@date-fns/tz'
import { parse as parseCsv } from 'csv-parse/sync'
import { isValid, parse as parseDate } from 'date-fns'
import type { DateOrder, ExposureKind, FileColumns } from '@/lib/conditions/schema'
import { fileLinesAtMost } from '@/lib/conditions/schema'
import { AppError, invalidField } from '@/lib/errors'
import { parseDecimal } from '@/lib/format'
import { wbgtIndoorC } from '@/lib/science/exposure'
import { celsiusFromF } from '@/lib/science/temperature'

/*
 * A meter's file: any of comma, semicolon and tab between, a header anywhere in its first lines or none, decimal comma
 * or point, times with a zone of their own or of the one that is given. Every line that does not fit is said.
 */

export type FileReading = {
  line: number
  atMs: number
  value: number
  wetBulbC: number | null
  globeC: number | null
}
export type FileFault = { line: number; column: string; sentence: string; text: string }

export type ReadFile = {
  columns: string[]
  chosen: FileColumns
  lineCount: number
  readings: FileReading[]
  faults: FileFault[]
}

export type FileReadingRules = {
  kind: ExposureKind
  dateOrder: DateOrder
  /** IANA zone of times that say none. */
  timeZone: string
  temperatureUnit: 'C' | 'F'
  columns: FileColumns
  /** Readings after it are in the future. */
  nowMs: number
}

type Line = { line: number; cells: string[] }

const headerWithin = 40

/** @throws AppError 'invalid' naming `text` or a column when the file as a whole cannot be read */
export function readExposureFile(text: string, rules: FileReadingRules): ReadFile {
  const lines = splitLines(text)
  const headerAt = findHeader(lines.slice(0, headerWithin), rules)
  const header = headerAt < 0 ? null : (lines[headerAt]?.cells ?? null)
  const columns = header?.map(named) ?? (lines[0]?.cells ?? []).map((_, i) => `Column ${i + 1}`)
  const chosen = chooseColumns(columns, header !== null, rules)
  const body = lines.slice(headerAt + 1)
  if (body.length === 0) throw invalidField('text', 'This file has no line of readings.')
  if (body.length > fileLinesAtMost)
    throw invalidField(
      'text',
      `This file has ${body.length} lines; at most ${fileLinesAtMost} are taken. Let the meter write one a minute.`,
    )
  return { columns, chosen, lineCount: body.length, ...readLines(body, columns, chosen, rules) }
}

function splitLines(text: string): Line[] {
  const plain = text.replace(/^\uFEFF/, '')
  try {
    const rows: unknown = parseCsv(plain, {
      delimiter: delimiterOf(plain),
      relax_column_count: true,
      relax_quotes: true,
      skip_empty_lines: true,
      trim: true,
      info: true,
    })
    return linesOf(rows).filter(({ cells }) => cells.some((cell) => cell !== ''))
  } catch {
    throw invalidField('text', 'This file is no table: a quotation mark in it is never closed.')
  }
}

/** With `info`, csv-parse gives each record with the line that it ends on. */
function linesOf(rows: unknown): Line[] {
  if (!Array.isArray(rows)) return []
  return rows.map((row: unknown) => {
    const record: unknown = Reflect.get(Object(row), 'record')
    const line: unknown = Reflect.get(Object(Reflect.get(Object(row), 'info')), 'lines')
    return { line: Number(line), cells: Array.isArray(record) ? record.map(String) : [] }
  })
}

/** What stands between cells: the one that occurs most in the first lines; a comma only where nothing else does. */
function delimiterOf(text: string): string {
  const head = text.split('\n').slice(0, headerWithin).join('\n')
  const count = (mark: string) => head.split(mark).length - 1
  if (count('\t') > 0 && count('\t') >= count(';')) return '\t'
  return count(';') > 0 ? ';' : ','
}

const looksLike = {
  date: /^(date|day|datum|jour|fecha)\b/i,
  time: /(time|zeit|heure|hora|\bat\b)/i,
  wetBulb: /(tnw|natural wet|wet.?bulb|\bnwb\b)/i,
  globe: /(\btg\b|globe)/i,
} as const

const valueName: Record<ExposureKind, RegExp> = {
  'carbon monoxide': /(\bco\b|carbon monoxide|ppm)/i,
  heat: /wbgt/i,
}

/** The first line that names a time and a reading; else the first that names a time; -1 for none. */
function findHeader(lines: readonly Line[], { kind, columns }: FileReadingRules): number {
  const wanted = Object.values(columns)
  const namesReading = (cells: readonly string[]) =>
    cells.some((cell) => valueName[kind].test(cell) || looksLike.wetBulb.test(cell) || wanted.includes(cell))
  const best = lines.findIndex(({ cells }) => isHeader(cells) && namesReading(cells))
  return best >= 0 ? best : lines.findIndex(({ cells }) => isHeader(cells))
}

function isHeader(cells: readonly string[]): boolean {
  const isNamed = cells.some((cell) => looksLike.time.test(cell) || looksLike.date.test(cell))
  return isNamed && cells.length >= 2 && cells.every((cell) => parseDecimal(cell) === null || cell === '')
}

function named(cell: string, i: number): string {
  return cell === '' ? `Column ${i + 1}` : cell
}

function chooseColumns(columns: readonly string[], hasHeader: boolean, rules: FileReadingRules): FileColumns {
  for (const [what, name] of Object.entries(rules.columns)) {
    if (name !== undefined && !columns.includes(name))
      throw invalidField(`columns.${what}`, `There is no column “${name}” in this file.`)
  }
  const found = hasHeader ? findByName(columns, rules.kind) : { time: columns[0], value: columns[1] }
  const chosen = { ...found, ...rules.columns }
  if (chosen.date !== undefined && chosen.time === chosen.date) delete chosen.date
  if (chosen.time === undefined && chosen.date !== undefined) {
    chosen.time = chosen.date
    delete chosen.date
  }
  if (rules.columns.wetBulb !== undefined && rules.columns.globe !== undefined) delete chosen.value
  if (chosen.time === undefined)
    throw invalidField('columns.time', `Say which column has the time: ${columns.join(', ')}.`)
  const hasPair = chosen.wetBulb !== undefined && chosen.globe !== undefined
  if (chosen.value === undefined && !(rules.kind === 'heat' && hasPair))
    throw invalidField('columns.value', `Say which column has the reading: ${columns.join(', ')}.`)
  if (chosen.value !== undefined && /mg\s*\/\s*m/i.test(chosen.value))
    throw invalidField('columns.value', 'This column is in mg/m³. Let the meter write ppm.')
  return chosen
}

function findByName(columns: readonly string[], kind: ExposureKind): FileColumns {
  const first = (pattern: RegExp) => columns.find((name) => pattern.test(name))
  const date = columns.find((name) => looksLike.date.test(name) && !looksLike.time.test(name))
  const value = first(valueName[kind])
  const pair = kind === 'heat' && value === undefined
  return definedOnly({
    date,
    time: first(looksLike.time),
    value,
    wetBulb: pair ? first(looksLike.wetBulb) : undefined,
    globe: pair ? first(looksLike.globe) : undefined,
  })
}

function definedOnly(columns: Record<keyof FileColumns, string | undefined>): FileColumns {
  return Object.fromEntries(Object.entries(columns).filter(([, name]) => name !== undefined))
}

function readLines(
  body: readonly Line[],
  columns: readonly string[],
  chosen: FileColumns,
  rules: FileReadingRules,
): Pick<ReadFile, 'readings' | 'faults'> {
  const readings: FileReading[] = []
  const faults: FileFault[] = []
  const lineOf = new Map<number, number>()
  const readInstant = instantReader(rules)
  for (const { line, cells } of body) {
    const cellOf = (name: string | undefined) =>
      name === undefined ? '' : (cells[columns.indexOf(name)] ?? '')
    const fault = (column: string | undefined, sentence: string, text: string) =>
      faults.push({ line, column: column ?? '', sentence, text: text.slice(0, 80) })
    const written = [cellOf(chosen.date), cellOf(chosen.time)].filter((part) => part !== '').join(' ')
    const atMs = readInstant(written)
    const value = readValue(cellOf, chosen, rules)
    if (atMs === null) fault(chosen.time, `Not a time with its date, ${rules.dateOrder}.`, written)
    else if (atMs > rules.nowMs) fault(chosen.time, 'This lies in the future.', written)
    else if (lineOf.has(atMs))
      fault(chosen.time, `The same time stands on line ${lineOf.get(atMs)}.`, written)
    else if ('sentence' in value) fault(value.column, value.sentence, value.text)
    else {
      lineOf.set(atMs, line)
      readings.push({ line, atMs, ...value })
    }
  }
  return { readings, faults }
}

type Value = Pick<FileReading, 'value' | 'wetBulbC' | 'globeC'>

function readValue(
  cellOf: (name: string | undefined) => string,
  chosen: FileColumns,
  rules: FileReadingRules,
): Value | { column: string; sentence: string; text: string } {
  const read = (name: string | undefined, [least, most]: readonly [number, number]) => {
    const text = cellOf(name)
    const typed = parseDecimal(text)
    const value =
      typed !== null && rules.kind === 'heat' && rules.temperatureUnit === 'F' ? celsiusFromF(typed) : typed
    const sentence =
      text === ''
        ? 'No reading here.'
        : value === null
          ? 'Not a number.'
          : value < least || value > most
            ? `Not from ${least} to ${most}.`
            : null
    return { value: value ?? 0, fault: sentence === null ? null : { column: name ?? '', sentence, text } }
  }
  if (chosen.value !== undefined) {
    const { value, fault } = read(chosen.value, rules.kind === 'heat' ? [-20, 80] : [0, 10_000])
    return fault ?? { value, wetBulbC: null, globeC: null }
  }
  const wetBulb = read(chosen.wetBulb, [-20, 80])
  const globe = read(chosen.globe, [-20, 150])
  const fault = wetBulb.fault ?? globe.fault
  return (
    fault ?? {
      value: wbgtIndoorC(wetBulb.value, globe.value),
      wetBulbC: wetBulb.value,
      globeC: globe.value,
    }
  )
}

const datePatterns: Record<DateOrder, readonly string[]> = {
  'year first': ['yyyy-MM-dd', 'yyyy/MM/dd', 'yyyy.MM.dd', 'yyyyMMdd'],
  'day first': ['dd/MM/yyyy', 'dd.MM.yyyy', 'dd-MM-yyyy'],
  'month first': ['MM/dd/yyyy', 'MM.dd.yyyy', 'MM-dd-yyyy'],
}
const timePatterns = ['HH:mm:ss', 'HH:mm', 'HH:mm:ss.SSS', 'hh:mm:ss a', 'hh:mm a', 'HHmmss']

/** Reads instants; the pattern that fitted last is tried first, since a file keeps to one. */
function instantReader({ dateOrder, timeZone }: FileReadingRules): (written: string) => number | null {
  const dates = [
    ...datePatterns['year first'],
    ...(dateOrder === 'year first' ? [] : datePatterns[dateOrder]),
  ]
  const patterns = dates.flatMap((date) => timePatterns.map((time) => `${date} ${time}`))
  const zone = tz(timeZone)
  const reference = new Date(0)
  return (written) => {
    const plain = written.replace(/(\d)T(\d)/, '$1 $2').replaceAll(/\s+/g, ' ')
    if (/(?:Z|[+-]\d\d:?\d\d)$/i.test(plain) && /:\d\d/.test(plain)) return sensible(Date.parse(written))
    for (const [i, pattern] of patterns.entries()) {
      const at = parseDate(plain, pattern, reference, { in: zone })
      if (!isValid(at)) continue
      const atMs = sensible(at.getTime())
      if (atMs === null) continue
      patterns.splice(i, 1)
      patterns.unshift(pattern)
      return atMs
    }
    return null
  }
}

/** Years that a meter can have written. */
function sensible(atMs: number): number | null {
  return atMs >= Date.UTC(2000, 0, 1) && atMs < Date.UTC(2200, 0, 1) ? atMs : null
}

/** @throws AppError 'invalid' with the first faults when a file must be whole */
export function refuseFaulty(faults: readonly FileFault[]): void {
  const [first] = faults
  if (first === undefined) return
  const more = faults.length === 1 ? '' : ` and ${faults.length - 1} more`
  throw new AppError(
    'invalid',
    `Line ${first.line}, ${first.column}: ${first.sentence} (${first.text})${more}. Mend the file, or leave those lines out.`,
    { fields: { skipsFaulty: `${faults.length} lines cannot be read.` } },
  )
}
