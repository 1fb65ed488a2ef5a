import type { TemperatureUnit } from '@/lib/format'
import type { Draft, DraftStage } from './editor-draft'
import { changeStage, nextKey } from './editor-draft'
import { readCell } from './number-cell'

/**
 * Rows pasted from a spreadsheet, in the table's own columns and the person's unit: stage, to, minutes, ±, lid, do.
 * They are written over the stages from `index` on and beyond the last one; a row of column heads is passed over, and
 * what a row leaves out stays as it is.
 */
export function pasteStages(draft: Draft, index: number, text: string, unit: TemperatureUnit): Draft {
  const rows = text
    .split(/\r?\n/)
    .map((line) => line.split('\t').map((cell) => cell.trim()))
    .filter((cells) => cells.length > 1 && cells.some((cell) => cell !== ''))
    .filter((cells) => readCell(cells[1] ?? '', 'temperature', unit) !== null)
  return rows.slice(0, 24 - index).reduce((written, cells, offset) => {
    const at = index + offset
    const whole = at < written.stages.length ? written : withEmptyStage(written)
    return changeStage(whole, at, readRow(cells, unit))
  }, draft)
}

function withEmptyStage(draft: Draft): Draft {
  const last = draft.stages.at(-1)
  const stage: DraftStage = {
    key: nextKey(draft),
    name: `Stage ${draft.stages.length + 1}`,
    kind: 'ramp',
    targetTempC: null,
    coalsTargetTempC: null,
    minutes: 5,
    bandC: last?.bandC ?? 7,
    lid: last?.lid ?? 'off',
    cuesText: '',
  }
  return { ...draft, stages: [...draft.stages, stage] }
}

function readRow(cells: readonly string[], unit: TemperatureUnit): Partial<DraftStage> {
  const [name, target, minutes, band, lid, cuesText] = cells
  return {
    ...(name === undefined || name === '' ? {} : { name }),
    ...(target === undefined ? {} : { targetTempC: readCell(target, 'temperature', unit) }),
    ...(minutes === undefined || minutes === '' ? {} : { minutes: readCell(minutes, 'number', unit) }),
    ...(band === undefined || band === '' ? {} : { bandC: readCell(band, 'difference', unit) }),
    ...(lid === 'on' || lid === 'off' ? { lid } : {}),
    ...(cuesText === undefined ? {} : { cuesText }),
  }
}
