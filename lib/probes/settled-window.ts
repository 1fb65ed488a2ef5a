import type { EntityManager } from '@mikro-orm/postgresql'
import { invalidField } from '@/lib/errors'
import { readRawReadings } from '@/lib/probes/read-raw-readings'
import { settlingRule } from '@/lib/probes/settling-rule'
import { nowMs } from '@/lib/runtime'
import type { SiteRules } from '@/lib/science/site-rules'
import type { SettlingState } from '@/lib/science/stability'
import { settlingOf } from '@/lib/science/stability'

export type SettledWindow = { meanC: number; sdC: number; slopeCPerMin: number }

/** What is taken may have been seen this long ago: a finger is slower than a reading. */
const takenAtMostAgoMs = 120_000

const whyNot: Record<Exclude<SettlingState, 'settled'>, string> = {
  stale: 'The probe had fallen silent. Look at its gateway.',
  'no reading': 'There was no reading in between. Look at the probe’s lead.',
  'too few': 'It has not given readings for long enough.',
  scattered: 'It still scatters too much.',
  drifting: 'It still drifts too fast.',
}

/**
 * The settled readings of a probe that a person took: the window before `takenAt`, from what is stored, uncorrected.
 * @throws AppError 'invalid' naming `field` when they had not settled, or were taken too long ago
 */
export async function settledWindow(
  em: EntityManager,
  probeId: string,
  takenAt: string,
  checks: SiteRules['checks'],
  field: string,
): Promise<SettledWindow> {
  const takenMs = Date.parse(takenAt)
  const agoMs = nowMs() - takenMs
  if (agoMs > takenAtMostAgoMs || agoMs < -5_000) {
    throw invalidField(field, 'This was not taken just now. Let it settle and take it again.')
  }
  const rule = settlingRule(checks)
  const raw = await readRawReadings(em, probeId, takenMs - (rule.windowS + 10) * 1000, takenMs)
  const timeS = raw.atMs.map((atMs) => (atMs - takenMs) / 1000)
  const settling = settlingOf(timeS, raw.tempC, 0, rule)
  const { state, meanC, sdC, slopeCPerMin } = settling
  if (state !== 'settled') throw invalidField(field, `${whyNot[state]} Wait until it has settled.`)
  if (meanC === null || sdC === null || slopeCPerMin === null) throw new Error('settled without figures')
  return { meanC, sdC, slopeCPerMin }
}
