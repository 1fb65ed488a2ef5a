import type { FiringDto } from '@/lib/firings/schema'
import { checkReadings } from '@/lib/ingest/checked-readings'
import type { FiringReadings, FiringSeries } from '@/lib/ingest/firing-readings'
import { toReadingSeries } from '@/lib/ingest/firing-readings'
import type { RecipeContent } from '@/lib/recipes/schema'
import type { ScoreInput, ScoreRecipe } from '@/lib/science/score-types'
import type { SiteRules } from '@/lib/science/site-rules'

const minutesBetween = (from: string | null, to: string | null) =>
  from === null || to === null ? null : (Date.parse(to) - Date.parse(from)) / 60_000

/** The recipe copy as the score reads it. */
export function scoreRecipeOf(content: RecipeContent): ScoreRecipe {
  return {
    planStartTempC: content.planStartTempC,
    stages: content.stages.map((stage) => ({
      name: stage.name,
      kind: stage.kind,
      targetTempC: stage.targetTempC,
      minutes: stage.minutes,
      bandC: stage.bandC,
    })),
    doseTargetMin: content.doseTargetMinutes,
    doseToleranceLog10: content.doseToleranceLog10,
    leadPlace: content.leadPlace,
    thicknessMm: content.thicknessMm,
    limits: {
      woodMaxTempC: content.limits.woodMaximumC,
      climbMaxCPerMin: content.limits.climbMaximumCPerMin,
      spreadMaxC: content.limits.spreadC,
    },
    preheat: {
      moistureMinPercent: content.preheat.moistureMinPercent,
      moistureMaxPercent: content.preheat.moistureMaxPercent,
      minutesMin: content.preheat.minutes === 0 ? null : content.preheat.minutes,
    },
    bend: { minutesMin: content.bend.minimumMinutes === 0 ? null : content.bend.minimumMinutes },
  }
}

/** How long the pull took: from the bend's start to the pull mark, or to the toast when none was made. */
function pullMinutes(firing: FiringDto): number | null {
  const pull = firing.marks.find((mark) => mark.kind === 'pull' && mark.isInForce)
  return minutesBetween(firing.bendAt, pull?.at ?? firing.toastAt)
}

/** The lead probes that read the toast; one from before a move to another hearth did not. */
function toastLeads(lead: FiringSeries | undefined, toastAtMs: number): FiringSeries['assignments'] {
  return lead?.assignments.filter((assignment) => assignment.untilMs > toastAtMs) ?? []
}

/** Changes of the lead probe in the toast, and whether the new one sits at the same place. */
function leadSwaps(leads: FiringSeries['assignments'], toastAtMs: number): ScoreInput['firing']['leadSwaps'] {
  return leads.slice(1).map((assignment, index) => {
    const before = leads[index]?.place
    const place = assignment.place
    return {
      timeS: (assignment.fromMs - toastAtMs) / 1000,
      isSamePlace:
        before !== undefined &&
        before.height === place.height &&
        before.side === place.side &&
        before.depthMm === place.depthMm &&
        before.mounting === place.mounting,
    }
  })
}

/**
 * Everything that a score reads, from what is stored of a firing: what was stuck or jumped is no reading. Null when it
 * never toasted or had no lead probe.
 */
export function scoreInputOf(firing: FiringDto, stored: FiringReadings, rules: SiteRules): ScoreInput | null {
  const readings = checkReadings(stored, rules.signals)
  const lead = readings.series.find((series) => series.role === 'lead')
  if (firing.toastAt === null || firing.recipeCopy === null || lead === undefined) return null
  const toastAtMs = Date.parse(firing.toastAt)
  const leads = toastLeads(lead, toastAtMs)
  const [assignment] = leads
  if (assignment === undefined) return null
  const sinceToastS = (at: string) => (Date.parse(at) - toastAtMs) / 1000
  const opposite = readings.series.find((series) => series.role === 'opposite')
  const restAt = firing.restAt ?? firing.endedAt
  return {
    recipe: scoreRecipeOf(firing.recipeCopy.content),
    firing: {
      restStartS: restAt === null ? null : sinceToastS(restAt),
      stageMarks: firing.marks
        .filter((mark) => mark.kind === 'stage' && mark.isInForce && mark.stagePosition !== null)
        // The mark says which stage ended, counted from 1: the index of the one that begins, counted from 0.
        .map((mark) => ({ stageIndex: mark.stagePosition ?? 0, timeS: sinceToastS(mark.at) }))
        .filter((mark) => mark.stageIndex < (firing.recipeCopy?.content.stages.length ?? 0)),
      preheatMinutes: minutesBetween(firing.preheatAt, firing.bendAt ?? firing.toastAt),
      moisturePercent: firing.moisturePercent,
      moistureMethod: firing.moistureMethod,
      bendMinutes: pullMinutes(firing),
      roomTempC: null,
      specificGravity: null,
      leadSwaps: leadSwaps(leads, toastAtMs),
    },
    lead: toReadingSeries(lead, toastAtMs),
    opposite: opposite === undefined ? null : toReadingSeries(opposite, toastAtMs),
    leadProbe: {
      type: assignment.conversion.type,
      iecClass: assignment.iecClass,
      place: assignment.place,
      check: assignment.conversion.correction.check,
    },
    rules,
  }
}
