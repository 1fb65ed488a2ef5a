/** One probe's readings by column, in stored units and in time order: ms since 1970 UTC, 0.1 µV, 0.01 °C. */
export type ReadingColumns = {
  atMs: number[]
  emfTenthUv: (number | null)[]
  coldCentiC: (number | null)[]
  tempCentiC: (number | null)[]
  flag: number[]
}

export function emptyColumns(): ReadingColumns {
  return { atMs: [], emfTenthUv: [], coldCentiC: [], tempCentiC: [], flag: [] }
}

export function appendRow(to: ReadingColumns, from: ReadingColumns, i: number): void {
  to.atMs.push(from.atMs[i] ?? 0)
  to.emfTenthUv.push(from.emfTenthUv[i] ?? null)
  to.coldCentiC.push(from.coldCentiC[i] ?? null)
  to.tempCentiC.push(from.tempCentiC[i] ?? null)
  to.flag.push(from.flag[i] ?? 0)
}

function compareRows(a: ReadingColumns, i: number, b: ReadingColumns, j: number): number {
  return (
    compare(a.atMs[i], b.atMs[j]) ||
    compare(a.emfTenthUv[i], b.emfTenthUv[j]) ||
    compare(a.coldCentiC[i], b.coldCentiC[j]) ||
    compare(a.tempCentiC[i], b.tempCentiC[j]) ||
    compare(a.flag[i], b.flag[j])
  )
}

/** Null comes first. */
function compare(a: number | null | undefined, b: number | null | undefined): number {
  return (a ?? -Infinity) < (b ?? -Infinity) ? -1 : (a ?? -Infinity) > (b ?? -Infinity) ? 1 : 0
}

/** The same rows in the one order that depends on nothing but what they say. */
export function sortColumns(columns: ReadingColumns): ReadingColumns {
  const order = columns.atMs.map((_, i) => i).sort((i, j) => compareRows(columns, i, columns, j))
  const sorted = emptyColumns()
  for (const i of order) appendRow(sorted, columns, i)
  return sorted
}

/**
 * What either has, each row as often as in the one that has it more often; both sorted by `sortColumns`. So uniting
 * a seal with the rows that are still in the table gives the seal again when nothing has come since.
 */
export function uniteColumns(a: ReadingColumns, b: ReadingColumns): ReadingColumns {
  const united = emptyColumns()
  let i = 0
  let j = 0
  while (i < a.atMs.length || j < b.atMs.length) {
    const order = i >= a.atMs.length ? 1 : j >= b.atMs.length ? -1 : compareRows(a, i, b, j)
    if (order <= 0) appendRow(united, a, i)
    else appendRow(united, b, j)
    if (order <= 0) i += 1
    if (order >= 0) j += 1
  }
  return united
}
