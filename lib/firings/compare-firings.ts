import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import { forkEm } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { firingCurves, placeName } from '@/lib/firings/firing-curves'
import type { FiringCurves, FiringPicture } from '@/lib/firings/picture-types'
import { readFiring } from '@/lib/firings/read-firing'
import { readScore, scoreResultOf } from '@/lib/firings/read-score'
import type { FiringDto } from '@/lib/firings/schema'
import { toastReadings } from '@/lib/firings/toast-readings'
import { formatNumber } from '@/lib/format'
import type { ProbePlace } from '@/lib/science/score-types'
import { currentSite, siteOfVersion } from '@/lib/site/current-site'

export const fewestCompared = 2
export const mostCompared = 6

export type ComparedFiring = Pick<FiringPicture, 'firing' | 'score' | 'rules'> & { curves: FiringCurves }

export type Comparison = { timeZone: string; firings: ComparedFiring[] }

/**
 * Two to six firings to be laid over one another from the toast start, in the order given. A toaster compares their
 * own. Curves compare at one probe place only.
 *
 * @throws AppError 'invalid' for too few or too many, 'not found', 'conflict' when one has no curve or the lead probes
 *   sat at different places; its `fields` say by firing id what stands in the way
 */
export async function compareFirings(actor: Actor, input: { ids: readonly string[] }): Promise<Comparison> {
  requirePermission(actor, 'firings:follow')
  const ids = [...new Set(input.ids)]
  if (ids.length < fewestCompared || ids.length > mostCompared) {
    throw new AppError('invalid', `Choose ${fewestCompared} to ${mostCompared} firings to compare.`, {
      fields: { id: `Choose ${fewestCompared} to ${mostCompared} firings.` },
    })
  }
  const em = await forkEm()
  const firings = await Promise.all(ids.map((id) => readComparable(actor, em, id)))
  requireToasted(firings)
  requireOnePlace(firings)
  const site = await currentSite(em)
  return {
    timeZone: site.timeZone,
    firings: await Promise.all(firings.map((firing) => readCompared(em, firing))),
  }
}

async function readComparable(actor: Actor, em: EntityManager, id: string): Promise<FiringDto> {
  const firing = await readFiring(em, id)
  const isOwn = actor.kind === 'person' && firing.toaster?.id === actor.accountId
  if (!isOwn && !isAllowed(actor, 'firings:read all')) {
    throw new AppError('not found', 'There is no such firing among yours.')
  }
  return firing
}

function leadPlace(firing: FiringDto): ProbePlace | null {
  return firing.probes.find((probe) => probe.role === 'lead') ?? null
}

function requireToasted(firings: readonly FiringDto[]): void {
  const without = firings.filter((firing) => firing.toastAt === null || leadPlace(firing) === null)
  if (without.length === 0) return
  throw new AppError('conflict', 'A firing without a toast has no curve to compare.', {
    fields: Object.fromEntries(
      without.map((firing) => [firing.id, `${firing.piece.serial} has no toast yet.`]),
    ),
  })
}

/** Two curves are comparable only at the same place (PRODUCT, recipe bench). */
function requireOnePlace(firings: readonly FiringDto[]): void {
  const places = firings.map((firing) => placeWords(leadPlace(firing)))
  const first = places[0]
  const others = firings.filter((_, i) => places[i] !== first)
  if (others.length === 0) return
  const words = firings.map((firing, i) => [
    firing.id,
    `${firing.piece.serial} was read at ${places[i] ?? ''}.`,
  ])
  throw new AppError(
    'conflict',
    'These lead probes sat at different places. A curve speaks for its own place only: two are comparable at the same height, side, depth and mounting.',
    { fields: Object.fromEntries(words) },
  )
}

function placeWords(place: ProbePlace | null): string {
  if (place === null) return 'no place'
  return `${placeName(place)}, ${formatNumber(place.depthMm, 1)} mm, ${place.mounting}`
}

async function readCompared(em: EntityManager, firing: FiringDto): Promise<ComparedFiring> {
  const site = await siteOfVersion(em, firing.siteSettingsVersion ?? 1)
  const [score, readings] = await Promise.all([
    readScore(em, firing.id),
    toastReadings(em, firing.id, firing.toastAt ?? '', site.rules.signals),
  ])
  const curves = firingCurves(firing, readings, site.rules, { points: 600, dosePoints: 200, woodColumns: 0 })
  if (curves === null) {
    throw new AppError('conflict', 'A firing whose lead probe gave no reading has no curve to compare.', {
      fields: { [firing.id]: `${firing.piece.serial} has no reading from its toast start on.` },
    })
  }
  return {
    firing,
    curves,
    rules: site.rules,
    score: score === null ? null : { ...score, result: scoreResultOf(score.result) },
  }
}
