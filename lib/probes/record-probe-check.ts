import type { EntityManager } from '@mikro-orm/postgresql'
import type * as z from 'zod'
import { ProbeEntity } from '@/entities/probe'
import { ProbeCheckEntity } from '@/entities/probe-check'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { AppError, invalidField } from '@/lib/errors'
import { checkDates } from '@/lib/probes/check-dates'
import { altitudeUncertaintyC, eyeResolutionC, farthestC, liveResolutionC } from '@/lib/probes/check-points'
import type { recordProbeCheckSchema } from '@/lib/probes/schema'
import { settledWindow } from '@/lib/probes/settled-window'
import { checkUncertaintyC } from '@/lib/science/check-uncertainty'
import type { SiteRules } from '@/lib/science/site-rules'
import { boilingPointC, standardPressurePa } from '@/lib/science/steam'
import { currentSite } from '@/lib/site/current-site'

type Input = z.infer<typeof recordProbeCheckSchema> & { probeId: string }
type Reference = { tempC: number; pressureHpa: number | null; altitudeM: number | null }
type Measured = {
  tempC: number
  settled: { sdC: number; slopeCPerMin: number } | null
  resolutionC: number
}

/**
 * Records one check of a probe; readings between checked points are corrected by it from then on. What the probe read
 * is given, or taken from its own settled readings, which are looked up here again.
 */
export async function recordProbeCheck(actor: Actor, input: Input): Promise<{ id: string }> {
  requirePermission(actor, 'checks:write')
  const person = requirePerson(actor)
  return inTransaction(async (em) => {
    const { rules } = await currentSite(em)
    const dates = checkDates(input, rules.checks.probeMonths)
    const probe = await em.findOne(ProbeEntity, { id: input.probeId })
    if (probe === null) throw new AppError('not found', 'There is no such probe.')
    if (probe.retiredAt)
      throw new AppError('conflict', `${probe.name} is retired: it is not checked any more.`)
    const reference = referenceOf(input)
    const measured = await measuredOf(em, input, rules.checks)
    requireNear(reference.tempC, measured.tempC)
    const check = em.create(ProbeCheckEntity, {
      probeId: input.probeId,
      kind: input.kind,
      referenceTempC: reference.tempC,
      measuredTempC: measured.tempC,
      uncertaintyC: uncertaintyOf(input, measured),
      stationPressureHpa: reference.pressureHpa,
      altitudeM: reference.altitudeM,
      way: measured.settled === null ? 'by hand' : 'live',
      referenceUncertaintyC: input.referenceUncertaintyC ?? null,
      settledSdC: measured.settled?.sdC ?? null,
      settledSlopeCPerMin: measured.settled?.slopeCPerMin ?? null,
      resolutionC: measured.resolutionC,
      ...dates,
      accountId: person.accountId,
    })
    await em.persistAndFlush(check)
    await writeAuditEntry(
      em,
      actor,
      'probe.checked',
      { type: 'probe', id: input.probeId },
      {
        checkId: check.id,
        kind: input.kind,
        way: check.way,
        referenceTempC: reference.tempC,
        measuredTempC: measured.tempC,
        uncertaintyC: check.uncertaintyC,
        dueAt: dates.dueAt.toISOString(),
      },
    )
    return { id: check.id }
  })
}

/** 0 °C for ice, the IF97 boiling point for the day's station pressure or an altitude's, or as given. */
function referenceOf(input: Input): Reference {
  if (input.kind === 'ice') return { tempC: 0, pressureHpa: null, altitudeM: null }
  if (input.kind === 'boiling') {
    const { stationPressureHpa, altitudeM = null } = input
    const pressureHpa =
      stationPressureHpa ?? (altitudeM === null ? undefined : standardPressurePa(altitudeM) / 100)
    if (pressureHpa === undefined) {
      throw invalidField('stationPressureHpa', 'Give the station pressure of the day, not the sea-level one.')
    }
    return {
      tempC: boilingPointC(pressureHpa),
      pressureHpa,
      altitudeM: stationPressureHpa === undefined ? altitudeM : null,
    }
  }
  if (input.referenceTempC === undefined)
    throw invalidField('referenceTempC', 'Give what the reference stood at.')
  return { tempC: input.referenceTempC, pressureHpa: null, altitudeM: null }
}

async function measuredOf(em: EntityManager, input: Input, checks: SiteRules['checks']): Promise<Measured> {
  if (input.takenAt !== undefined) {
    if (input.measuredTempC !== undefined) {
      throw invalidField('measuredTempC', 'Give this or the instant of its own readings, not both.')
    }
    const { meanC, sdC, slopeCPerMin } = await settledWindow(
      em,
      input.probeId,
      input.takenAt,
      checks,
      'takenAt',
    )
    return { tempC: meanC, settled: { sdC, slopeCPerMin }, resolutionC: liveResolutionC }
  }
  if (input.measuredTempC === undefined) throw invalidField('measuredTempC', 'Give what the probe read.')
  return { tempC: input.measuredTempC, settled: null, resolutionC: input.resolutionC ?? eyeResolutionC }
}

function uncertaintyOf(input: Input, measured: Measured): number {
  if (input.uncertaintyC !== undefined) return input.uncertaintyC
  return checkUncertaintyC(furtherReferenceC(input), measured.settled?.sdC ?? 0, measured.resolutionC)
}

/** Of the reference beyond what an ice bath or a barometer has of its own. */
function furtherReferenceC(input: Input): number {
  const { kind, referenceUncertaintyC } = input
  if (kind === 'ice') return 0
  if (kind === 'boiling') return input.stationPressureHpa === undefined ? altitudeUncertaintyC : 0
  if (referenceUncertaintyC === undefined) {
    throw invalidField(
      'referenceUncertaintyC',
      'Give the uncertainty of the reference, from its certificate.',
    )
  }
  return referenceUncertaintyC
}

function requireNear(referenceTempC: number, measuredTempC: number): void {
  if (Math.abs(referenceTempC - measuredTempC) <= farthestC) return
  throw invalidField(
    'measuredTempC',
    'This is too far from the reference to be its error. Look at the probe’s type, its plug and which probe it is.',
  )
}
