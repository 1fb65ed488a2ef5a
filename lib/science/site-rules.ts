import * as z from 'zod'

/**
 * Every constant of a site that a score depends on. A ruleset's number, these rules, the recipe copy and the stored
 * readings reproduce a score bit for bit: each stored score names the numbered version of these rules that it was made
 * with, a version never changes once written, and no score is made from the site's present ones. Plain JSON: no
 * undefined, no NaN.
 */

const finite = z.number()
const positive = z.number().positive()
const notNegative = z.number().min(0)

export const doseRulesSchema = z.strictObject({
  /** Temperature at which one minute counts one minute, °C. */
  refTempC: finite
    .min(100, 'The reference must be 100 °C or more')
    .max(300, 'The reference must be 300 °C or less'),
  /** Rise that makes the dose rate ten times larger, °C. */
  zC: positive.min(5, 'z must be 5 °C or more').max(100, 'z must be 100 °C or less'),
  /** Nothing counts below it, °C. */
  baseTempC: finite.min(0, 'The base must be 0 °C or more').max(200, 'The base must be 200 °C or less'),
})

export const indexRulesSchema = z.strictObject({
  /** Activation energies of the slow and the fast index, J/mol (Prins et al. 2006, extrapolated: see SCIENCE §2). */
  slowJPerMol: positive.max(500_000),
  fastJPerMol: positive.max(500_000),
})

export const staveRulesSchema = z.strictObject({
  /** Wood counts as toasted where its dose exceeds this, minutes at the reference temperature. */
  toastDepthDoseMin: positive.max(1000),
  /** Thickness when the recipe gives none, mm. */
  thicknessMm: positive.min(5).max(100),
  /** Oven-dry specific gravity when the wood lot gives none. */
  specificGravity: positive.min(0.3).max(1.2),
  /** Stave moisture at the toast start when the firing gives none, % of dry mass. */
  moisturePercent: notNegative.max(100),
  /** Room behind the stave, °C. */
  roomTempC: finite.min(-40).max(80),
  /** Heat transfer from the cold face to the room, W/(m²·K); SCIENCE §3 gives 8–15. */
  coldFaceHWPerM2K: notNegative.max(100),
  /** Half-width of the probe hole's depth, mm: what the range of face and toast depth is made from. */
  probeDepthErrorMm: notNegative.max(10),
  /** Half-width of the wood's diffusivity, as a share of it (judgement). */
  diffusivityErrorShare: notNegative.max(1),
})

export const errorRulesSchema = z.strictObject({
  /** Half-widths at k = 2, °C: reference junction, and how the probe sits in its hole (judgement). */
  coldJunctionC: notNegative.max(20),
  mountC: notNegative.max(50),
  /** The site's repeatability of one probe placed again at the same mount, log10 of dose, k = 2. */
  sameMountLog10: positive.max(1),
  /** True until the site has measured its own repeatability. The assumed figure covers drift too. */
  isSameMountAssumed: z.boolean(),
  /** Drift of a probe between two checks, °C; joins the same-mount interval once that is measured. */
  driftC: notNegative.max(20),
})

export const gapRulesSchema = z
  .strictObject({
    /** A silence longer than this many nominal spacings is a gap. */
    gapFromSpacings: positive.min(1.5).max(20),
    /** Up to this long a gap is joined by a straight line, s. */
    interpolateUpToS: positive.max(600),
    /** Up to this long it is joined and the interval widened by both extremes; longer is incomplete, s. */
    widenUpToS: positive.max(1800),
    /** All gaps together above this share of the toast: incomplete. */
    incompleteAboveShare: positive.max(1),
  })
  .refine((gaps) => gaps.widenUpToS >= gaps.interpolateUpToS, {
    path: ['widenUpToS'],
    error: 'The longest gap that is joined must be at least as long as the longest that is only interpolated',
  })

export const limitRulesSchema = z.strictObject({
  /** The wood maximum is broken when it is exceeded for longer than this, s. */
  woodMaxHeldS: notNegative.max(600),
  /** The climb is taken over this window, s. */
  climbWindowS: positive.max(600),
})

export const forecastRulesSchema = z.strictObject({
  /** A firing off the plan is taken to come back to it over this long, or slower if the climb maximum asks it, min. */
  rejoinMin: positive.max(60),
  /** A target further away than this is not forecast, min. */
  horizonMin: positive.max(1440),
})

export const checkRulesSchema = z.strictObject({
  /** When a probe check and a water check are due again, months after, unless another date is given. */
  probeMonths: positive.max(60),
  waterMonths: positive.max(60),
  /** A check that runs out within this is said to be due soon, days. */
  dueSoonDays: notNegative.max(90),
  /** Water above either is not used: TCA, ng/L (SCIENCE §8, from memory), free chlorine, mg/L (common practice). */
  waterTcaMaxNgPerL: positive.max(1000),
  waterFreeChlorineMaxMgPerL: positive.max(20),
  /** A probe at a reference has settled when, over this long, s, … */
  settleWindowS: positive.min(20, 'The window must be 20 s or more').max(600),
  /** … its readings scatter by no more than this, °C (standard deviation), and … */
  settleSdC: positive.max(5),
  /** … drift by no more than this, °C/min. */
  settleSlopeCPerMin: positive.max(5),
})

/** Defaults; a version of the settings from before these rules were written is read with them. */
const defaultCheckRules: z.infer<typeof checkRulesSchema> = {
  probeMonths: 6,
  waterMonths: 3,
  dueSoonDays: 14,
  waterTcaMaxNgPerL: 1.5,
  waterFreeChlorineMaxMgPerL: 0.1,
  settleWindowS: 60,
  settleSdC: 0.15,
  settleSlopeCPerMin: 0.1,
}

export const signalRulesSchema = z.strictObject({
  /**
   * Readings that are stuck or jump are no readings, live and in the score. False in the rules of before these checks
   * were there, so that an old score is made again as it was.
   */
  areChecked: z.boolean(),
  /** A probe is stuck when it stays within `stuckWithinC` for so long, s, while the coals move by `stuckWitnessC`. */
  stuckAfterS: positive.min(5).max(600),
  stuckWithinC: notNegative.max(0.2),
  stuckWitnessC: positive.min(1).max(200),
  /** Wood changes by less than this in one second, °C. */
  stepC: positive.min(10).max(300),
  /** After a jump a probe is believed again once its readings have agreed for so long, s. */
  stepAgreeS: positive.max(60),
  /** An opposite pair disagrees when it is further apart than this, °C, for so long, s. */
  pairApartC: positive.min(2).max(150),
  pairApartS: positive.max(600),
  /** A gateway is lost when no message came from it for so long, s. */
  gatewayLostAfterS: positive.min(2).max(120),
  /** A gateway's clock differs when it is off by more than this, s. */
  clockApartS: positive.min(0.5).max(3600),
})

export const alarmRulesSchema = z.strictObject({
  /** An alarm comes after its limit was passed for so long, and goes after it was well inside for so long, s. */
  onDelayS: positive.min(1).max(60),
  offDelayS: positive.min(1).max(300),
  /** Well inside: by this much, °C. */
  deadbandC: positive.max(20),
  /** The same for a climb, as a share of its limit. */
  climbDeadbandShare: positive.max(0.9),
  /** Spread and below band come and go by themselves: they are alarms only after so long, s. */
  slowOnDelayS: positive.min(5).max(1800),
  /** Below band is further below the plan than so many half-bands. */
  belowBandTimes: positive.min(1).max(10),
  /** A stage is overrun so long after its time, s; what was due is reminded of so long after it, s. */
  overrunAfterS: notNegative.max(3600),
  remindAfterS: notNegative.max(600),
  /** An alarm is shelved for at most so long, min. */
  shelveAtMostMin: positive.min(1).max(120),
})

const defaultSignalRules: z.infer<typeof signalRulesSchema> = {
  areChecked: true,
  stuckAfterS: 30,
  stuckWithinC: 0.05,
  stuckWitnessC: 10,
  stepC: 40,
  stepAgreeS: 3,
  pairApartC: 25,
  pairApartS: 30,
  gatewayLostAfterS: 5,
  clockApartS: 2,
}

const defaultAlarmRules: z.infer<typeof alarmRulesSchema> = {
  onDelayS: 5,
  offDelayS: 15,
  deadbandC: 4,
  climbDeadbandShare: 0.2,
  slowOnDelayS: 60,
  belowBandTimes: 2,
  overrunAfterS: 60,
  remindAfterS: 30,
  shelveAtMostMin: 15,
}

/**
 * A part that came later has a default, with which a version of the settings from before it is read. Signals were not
 * checked then: a score that names such a version is made again as it was.
 */
export const siteRulesSchema = z.strictObject({
  dose: doseRulesSchema,
  indices: indexRulesSchema,
  stave: staveRulesSchema,
  errors: errorRulesSchema,
  gaps: gapRulesSchema,
  limits: limitRulesSchema,
  forecast: forecastRulesSchema,
  checks: checkRulesSchema.default(defaultCheckRules),
  signals: signalRulesSchema.default({ ...defaultSignalRules, areChecked: false }),
  alarms: alarmRulesSchema.default(defaultAlarmRules),
  /** A marked turn-over silences NO READING for this long, s; the gap still counts. */
  noReadingSilenceS: notNegative.max(600),
  /** Recipe tolerance when the recipe sets none, log10 of dose. */
  doseToleranceLog10: positive.max(1),
  /** Shortest pull at the bend when the recipe sets none, min. */
  bendMin: notNegative.max(240),
})

export type SiteRules = z.infer<typeof siteRulesSchema>

/** The product's defaults: SCIENCE §§2, 3 and 5. A site changes them by writing a new, numbered version. */
export const defaultSiteRules: SiteRules = {
  dose: { refTempC: 200, zC: 34, baseTempC: 120 },
  indices: { slowJPerMol: 76_000, fastJPerMol: 151_700 },
  stave: {
    toastDepthDoseMin: 0.1,
    thicknessMm: 27,
    specificGravity: 0.64,
    moisturePercent: 20,
    roomTempC: 20,
    coldFaceHWPerM2K: 10,
    probeDepthErrorMm: 0.5,
    diffusivityErrorShare: 0.2,
  },
  errors: { coldJunctionC: 0.5, mountC: 3, sameMountLog10: 0.045, isSameMountAssumed: true, driftC: 0.5 },
  gaps: { gapFromSpacings: 3, interpolateUpToS: 30, widenUpToS: 180, incompleteAboveShare: 0.05 },
  limits: { woodMaxHeldS: 10, climbWindowS: 60 },
  forecast: { rejoinMin: 2, horizonMin: 240 },
  checks: defaultCheckRules,
  signals: defaultSignalRules,
  alarms: defaultAlarmRules,
  noReadingSilenceS: 90,
  doseToleranceLog10: 0.12,
  bendMin: 10,
}
