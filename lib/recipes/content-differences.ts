import type { TemperatureUnit } from '@/lib/format'
import { formatClimb, formatNumber, formatTemp, formatTempDifference } from '@/lib/format'
import { printCues } from '@/lib/recipes/cue-text'
import type { RecipeContent, RecipeStage } from '@/lib/recipes/schema'

/** One thing that two contents say differently, in words; "none" where one side has no such stage. */
export type ContentDifference = { name: string; before: string; after: string }

type Line = { name: string; value: string }

function plain(value: number): string {
  return String(Number(value.toFixed(3)))
}

function stageLines(stage: RecipeStage, unit: TemperatureUnit, position: number): Line[] {
  const name = (what: string) => `Stage ${position}, ${what}`
  return [
    { name: name('name'), value: stage.name },
    { name: name('kind'), value: stage.kind },
    { name: name('wood'), value: formatTemp(stage.targetTempC, unit, 1) },
    {
      name: name('coals'),
      value: stage.coalsTargetTempC === null ? 'none' : formatTemp(stage.coalsTargetTempC, unit),
    },
    { name: name('minutes'), value: plain(stage.minutes) },
    { name: name('band'), value: formatTempDifference(stage.bandC, unit, 1) },
    { name: name('lid'), value: stage.lid },
    { name: name('cues'), value: printCues(stage.cues) || 'none' },
  ]
}

/** Everything a content says, a line each, temperatures in the person's unit. */
export function contentLines(content: RecipeContent, unit: TemperatureUnit): Line[] {
  const { preheat, bend, limits, leadPlace } = content
  return [
    { name: 'Piece', value: content.pieceKind },
    { name: 'Size and shape', value: content.sizeAndShape },
    { name: 'Thickness', value: `${plain(content.thicknessMm)} mm` },
    {
      name: 'Lead probe',
      value: `${leadPlace.height}, side ${leadPlace.side}, ${plain(leadPlace.depthMm)} mm, ${leadPlace.mounting}`,
    },
    {
      name: 'Moisture',
      value: `${plain(preheat.moistureMinPercent)} to ${plain(preheat.moistureMaxPercent)} %`,
    },
    {
      name: 'Preheat',
      value: `${preheat.method}, ${formatTemp(preheat.waterTempC, unit)}, ${plain(preheat.minutes)} min`,
    },
    {
      name: 'Bend',
      value: `at least ${plain(bend.minimumMinutes)} min, wood below ${formatTemp(bend.woodLimitC, unit)}`,
    },
    { name: 'Start', value: formatTemp(content.planStartTempC, unit, 1) },
    ...content.stages.flatMap((stage, index) => stageLines(stage, unit, index + 1)),
    {
      name: 'Dose target',
      value: content.doseTargetMinutes === null ? 'the plan’s' : `${plain(content.doseTargetMinutes)} min`,
    },
    { name: 'Tolerance', value: formatNumber(content.doseToleranceLog10, 3) },
    { name: 'Wood maximum', value: formatTemp(limits.woodMaximumC, unit) },
    { name: 'Climb maximum', value: formatClimb(limits.climbMaximumCPerMin, unit) },
    { name: 'Spread', value: formatTempDifference(limits.spreadC, unit, 1) },
    { name: 'Rest', value: `${plain(content.restMinutes)} min` },
    { name: 'Flavour intent', value: content.flavourIntent || 'none' },
    { name: 'Notes', value: content.notes || 'none' },
  ]
}

/** What two contents say differently, in the order of the bench. */
export function contentDifferences(
  before: RecipeContent,
  after: RecipeContent,
  unit: TemperatureUnit,
): ContentDifference[] {
  const left = new Map(contentLines(before, unit).map(({ name, value }) => [name, value]))
  const right = new Map(contentLines(after, unit).map(({ name, value }) => [name, value]))
  return [...new Set([...left.keys(), ...right.keys()])]
    .map((name) => ({ name, before: left.get(name) ?? 'none', after: right.get(name) ?? 'none' }))
    .filter((line) => line.before !== line.after)
}
