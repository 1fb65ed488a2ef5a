/** One measured figure of the bench's table. */
export type Figure = {
  what: string
  value: number
  unit: string
  /** As TARGETS says it: `≥ 0.80`, `≤ 200`; empty when there is none. */
  target: string
}

/** Whether a figure meets its target; null when it has none. */
export function meetsTarget(figure: Figure): boolean | null {
  const [, sign, bound] = /^([≥≤]) ([\d.]+)/.exec(figure.target) ?? []
  if (sign === undefined || bound === undefined) return null
  return sign === '≥' ? figure.value >= Number(bound) : figure.value <= Number(bound)
}

/** The value below which the share `p` of the values lies (nearest rank). NaN for none. */
export function quantile(values: readonly number[], p: number): number {
  const sorted = [...values].sort((a, b) => a - b)
  return sorted[Math.min(sorted.length - 1, Math.max(0, Math.ceil(p * sorted.length) - 1))] ?? NaN
}

export function median(values: readonly number[]): number {
  return quantile(values, 0.5)
}

export function printFigures(figures: readonly Figure[]): string {
  const lines = figures.map((figure) => {
    const verdict = { true: 'met', false: 'MISSED', null: '' }[String(meetsTarget(figure))] ?? ''
    const value = Number.isInteger(figure.value) ? String(figure.value) : figure.value.toFixed(2)
    return [figure.what, value, figure.unit, figure.target, verdict]
  })
  const heads = ['what', 'value', 'unit', 'target', '']
  const widths = heads.map((head, i) => Math.max(head.length, ...lines.map((line) => (line[i] ?? '').length)))
  const row = (cells: readonly string[]) =>
    cells
      .map((cell, i) => (i === 1 ? cell.padStart(widths[i] ?? 0) : cell.padEnd(widths[i] ?? 0)))
      .join('  ')
      .trimEnd()
  return [row(heads), row(widths.map((width) => '-'.repeat(width))), ...lines.map(row)].join('\n')
}
