import { formatAge, formatNumber, toShownDifference, unitName } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { RecentReadingsDto } from '@/lib/probes/schema'
import type { Settling, SettlingRule } from '@/lib/science/stability'

/** How it stands with the settling, in a sentence with what to do. */
export function settlingWords(
  settling: Settling,
  readings: RecentReadingsDto,
  rule: SettlingRule,
): { words: string; isGood: boolean } {
  switch (settling.state) {
    case 'settled':
      return { words: 'Settled: take it.', isGood: true }
    case 'stale':
      return { words: staleWords(readings), isGood: false }
    case 'no reading':
      return { words: 'No reading. Look at the probe’s lead and plug.', isGood: false }
    case 'scattered':
      return { words: 'It still moves too much. Wait.', isGood: false }
    case 'drifting':
      return { words: 'It still drifts. Wait.', isGood: false }
    case 'too few':
      return { words: tooFewWords(settling, readings, rule), isGood: false }
  }
}

function staleWords({ nowMs, atMs }: RecentReadingsDto): string {
  const last = atMs.at(-1)
  if (last === undefined) return 'Nothing comes from this probe. Look at its gateway, or enter it by hand.'
  return `Nothing for ${formatAge((nowMs - last) / 1000)}. Look at its gateway, or enter it by hand.`
}

function tooFewWords(settling: Settling, { atMs }: RecentReadingsDto, rule: SettlingRule): string {
  if (atMs.length === 0) return 'Nothing comes from this probe. Look at its gateway, or enter it by hand.'
  const left = Math.max(1, Math.ceil(rule.windowS - settling.spanS))
  return `Wait ${left} s more: it is judged over ${rule.windowS} s.`
}

/** "scatter 0.04 of 0.15 °C, drift +0.02 of 0.10 °C a minute": what was found of what is allowed. */
export function settlingFigures(settling: Settling, rule: SettlingRule, unit: TemperatureUnit): string {
  if (settling.sdC === null || settling.slopeCPerMin === null) return ''
  const shown = (differenceC: number) => formatNumber(toShownDifference(differenceC, unit), 2)
  return (
    `Over ${rule.windowS} s: scatter ${shown(settling.sdC)} of ${shown(rule.sdMaxC)} ${unitName(unit)}, ` +
    `drift ${shown(settling.slopeCPerMin)} of ${shown(rule.slopeMaxCPerMin)} ${unitName(unit)} a minute.`
  )
}
