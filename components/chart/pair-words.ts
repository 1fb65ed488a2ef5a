import { formatClock, formatDoseFigure, formatNumber, formatTemp, formatTempBare } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { valueAt } from '@/lib/science/straight-line'
import { lastReading } from './pair-model'
import type { PairModel } from './pair-model'

export type GutterWords = { words: string; isStrong: boolean }

/** Whether the picture is live and has a fresh head; then the big figures name the lead, not the picture. */
export function isLive(model: PairModel): boolean {
  return model.nowS !== null
}

/** "toasted 8.5 mm": to half a millimetre, as the model allows. */
export function toastWords(depthMm: number): string {
  return `toasted ${formatNumber(Math.round(depthMm * 2) / 2, 1)} mm`
}

/** "never above 215°" */
export function limitWords(limitC: number, unit: TemperatureUnit): string {
  return `never above ${formatTempBare(limitC, unit)}`
}

/** All that may stand to the right of the plots, so that room is kept for it. */
export function describeGutterWords(model: PairModel): GutterWords[] {
  const words: GutterWords[] = []
  const plain = (text: string) => words.push({ words: text, isStrong: false })
  if (model.planBand.length > 0) plain(model.planName)
  if (model.limitC !== null) plain(limitWords(model.limitC, model.unit))
  if (!isLive(model))
    for (const line of [model.lead, ...(model.second ? [model.second] : []), ...model.others])
      plain(line.name)
  if (model.dose !== null) {
    plain(model.dose.target === null ? 'plan 00.0' : 'target 00.0')
  }
  if (model.wood !== null && !isLive(model)) words.push({ words: toastWords(12.5), isStrong: true })
  if (model.wood !== null && isLive(model)) words.push({ words: 'toasted', isStrong: true })
  return words
}

/** One sentence that says what the picture shows. */
export function describePair(model: PairModel): string {
  const parts = [`${model.title}. Wood temperature over ${formatNumber(model.xMaxS / 60)} minutes.`]
  const last = lastReading(model.lead)
  if (last === null) parts.push('No reading yet.')
  else {
    const when = model.nowS !== null && model.nowS - last.timeS > 3 ? 'no reading since' : 'last'
    parts.push(
      `${model.lead.name}: ${when} ${formatClock(last.timeS)}, ${formatTemp(last.tempC, model.unit)}.`,
    )
  }
  const current = model.stages.find((stage) => stage.isCurrent)
  if (current !== undefined) parts.push(`Stage ${current.name}.`)
  const dose = model.dose?.line.minutes.at(-1)
  if (dose !== undefined && !Number.isNaN(dose)) parts.push(`Dose ${formatDoseFigure(dose)} minutes.`)
  const toasted = model.wood?.toastDepthMm.at(-1)
  if (toasted !== undefined && !Number.isNaN(toasted)) parts.push(`By the model ${toastWords(toasted)}.`)
  if (model.limitC !== null) parts.push(`Limit: ${limitWords(model.limitC, model.unit)}.`)
  return parts.join(' ')
}

export type PairTableRow = { time: string; plan: string; temps: string[] }

/** The same picture as a table for those who cannot see it: a row every five minutes. */
export function tabulatePair(model: PairModel): { heads: string[]; rows: PairTableRow[] } {
  const lines = [model.lead, ...(model.second ? [model.second] : []), ...model.others]
  const bandTimes = model.planBand.map((point) => point.timeS)
  const bandMids = model.planBand.map((point) => point.midC)
  const show = (tempC: number) => (Number.isNaN(tempC) ? 'none' : formatTemp(tempC, model.unit))
  const rows = Array.from({ length: Math.floor(model.xMaxS / 300) + 1 }, (_, i) => ({
    time: formatClock(i * 300),
    plan: show(valueAt(bandTimes, bandMids, i * 300)),
    temps: lines.map((line) => show(valueAt(line.times, line.temps, i * 300))),
  }))
  return {
    heads: ['Time', model.planName === '' ? 'plan' : model.planName, ...lines.map((line) => line.name)],
    rows,
  }
}
