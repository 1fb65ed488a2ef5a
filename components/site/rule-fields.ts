/** The site's rules as a form shows them. Bounds come from the schema; `scale` turns the stored figure into the shown. */
export type RuleField = {
  /** Path within the rules, as an error names it after "rules.". */
  path: string
  label: string
  /** What it decides, in a sentence. */
  hint: string
  kind: 'number' | 'temperature' | 'difference' | 'yes or no'
  unit?: string
  scale?: number
  decimals?: number
}

export type RuleGroup = { title: string; intro: string; fields: readonly RuleField[] }

export const ruleGroups: readonly RuleGroup[] = [
  {
    title: 'Heat dose',
    intro: 'How temperature and time are folded into minutes at the reference temperature.',
    fields: [
      {
        path: 'dose.refTempC',
        label: 'Reference temperature',
        hint: 'One minute of wood at this temperature counts one minute.',
        kind: 'temperature',
      },
      {
        path: 'dose.zC',
        label: 'z',
        hint: 'The rise in temperature that makes a minute count ten times.',
        kind: 'difference',
        decimals: 2,
      },
      {
        path: 'dose.baseTempC',
        label: 'Base',
        hint: 'Below it nothing counts.',
        kind: 'temperature',
      },
      {
        path: 'indices.slowJPerMol',
        label: 'Slow index, activation energy',
        hint: 'Illustrative; fitted at 230 to 300 °C (Prins et al. 2006) and extrapolated.',
        kind: 'number',
        unit: 'kJ/mol',
        scale: 0.001,
      },
      {
        path: 'indices.fastJPerMol',
        label: 'Fast index, activation energy',
        hint: 'As above.',
        kind: 'number',
        unit: 'kJ/mol',
        scale: 0.001,
      },
      {
        path: 'doseToleranceLog10',
        label: 'Tolerance of a new recipe',
        hint: 'Used when a recipe sets none; 0.12 is about a third more or a quarter less dose.',
        kind: 'number',
        unit: 'log10',
        decimals: 3,
      },
    ],
  },
  {
    title: 'What a reading is worth',
    intro: 'Half-widths at k = 2, from which each dose gets its two intervals.',
    fields: [
      {
        path: 'errors.coldJunctionC',
        label: 'Cold junction',
        hint: 'Of the gateway’s own temperature.',
        kind: 'difference',
      },
      {
        path: 'errors.mountC',
        label: 'Mount',
        hint: 'How the probe sits in its hole (judgement).',
        kind: 'difference',
      },
      {
        path: 'errors.sameMountLog10',
        label: 'Same mount',
        hint: 'This room’s repeatability of placing a probe again at the same mount.',
        kind: 'number',
        unit: 'log10',
        decimals: 3,
      },
      {
        path: 'errors.isSameMountAssumed',
        label: 'The same-mount figure is assumed, not measured here',
        hint: 'Said beside every interval until the room has measured its own.',
        kind: 'yes or no',
      },
      {
        path: 'errors.driftC',
        label: 'Drift between two checks',
        hint: 'Joins the same-mount interval once that is measured.',
        kind: 'difference',
      },
    ],
  },
  {
    title: 'Gaps and limits',
    intro: 'When readings stop coming, and when a limit counts as broken.',
    fields: [
      {
        path: 'gaps.gapFromSpacings',
        label: 'A gap begins after',
        hint: 'So many usual spacings without a reading.',
        kind: 'number',
        unit: 'spacings',
      },
      {
        path: 'gaps.interpolateUpToS',
        label: 'Joined by a straight line up to',
        hint: 'Without widening the interval.',
        kind: 'number',
        unit: 's',
      },
      {
        path: 'gaps.widenUpToS',
        label: 'Joined and the interval widened up to',
        hint: 'A longer gap leaves the firing incomplete, without a score.',
        kind: 'number',
        unit: 's',
      },
      {
        path: 'gaps.incompleteAboveShare',
        label: 'Incomplete when all gaps together exceed',
        hint: 'Of the toast’s time.',
        kind: 'number',
        unit: '%',
        scale: 100,
      },
      {
        path: 'limits.woodMaxHeldS',
        label: 'Wood maximum broken when held for more than',
        hint: 'Shorter is an overshoot, not a broken limit.',
        kind: 'number',
        unit: 's',
      },
      {
        path: 'limits.climbWindowS',
        label: 'Climb taken over',
        hint: 'The window of the climb maximum.',
        kind: 'number',
        unit: 's',
      },
      {
        path: 'noReadingSilenceS',
        label: 'A marked turn-over silences NO READING for',
        hint: 'The gap still counts.',
        kind: 'number',
        unit: 's',
      },
      {
        path: 'bendMin',
        label: 'Shortest pull at the bend',
        hint: 'Used when a recipe sets none.',
        kind: 'number',
        unit: 'min',
      },
    ],
  },
  {
    title: 'The stave model',
    intro: 'Used where a recipe, wood lot or firing gives nothing better.',
    fields: [
      {
        path: 'stave.toastDepthDoseMin',
        label: 'Wood counts as toasted above a dose of',
        hint: 'To be tuned on cut offcuts.',
        kind: 'number',
        unit: 'min at the reference',
        decimals: 3,
      },
      {
        path: 'stave.thicknessMm',
        label: 'Stave thickness',
        hint: 'When the recipe gives none.',
        kind: 'number',
        unit: 'mm',
      },
      {
        path: 'stave.specificGravity',
        label: 'Specific gravity, oven-dry',
        hint: 'When the wood lot gives none; oak is about 0.60 to 0.72.',
        kind: 'number',
        unit: '',
        decimals: 3,
      },
      {
        path: 'stave.moisturePercent',
        label: 'Stave moisture at toast start',
        hint: 'When the firing gives none; percent of dry mass.',
        kind: 'number',
        unit: '%',
      },
      {
        path: 'stave.roomTempC',
        label: 'Room behind the stave',
        hint: 'When no room temperature is kept.',
        kind: 'temperature',
      },
      {
        path: 'stave.coldFaceHWPerM2K',
        label: 'Heat transfer at the cold face',
        hint: 'Usual are 8 to 15.',
        kind: 'number',
        unit: 'W/(m²·K)',
      },
      {
        path: 'stave.probeDepthErrorMm',
        label: 'Half-width of the probe hole’s depth',
        hint: 'The range of face dose and toast depth is made from it.',
        kind: 'number',
        unit: 'mm',
      },
      {
        path: 'stave.diffusivityErrorShare',
        label: 'Half-width of the wood’s diffusivity',
        hint: 'Judgement.',
        kind: 'number',
        unit: '%',
        scale: 100,
      },
    ],
  },
  {
    title: 'Forecast',
    intro: 'What the fireside’s advice supposes.',
    fields: [
      {
        path: 'forecast.rejoinMin',
        label: 'A firing off the plan comes back to it over',
        hint: 'Or slower, if the climb maximum asks it.',
        kind: 'number',
        unit: 'min',
      },
      {
        path: 'forecast.horizonMin',
        label: 'Nothing is forecast further ahead than',
        hint: 'A target beyond it is said to be out of reach.',
        kind: 'number',
        unit: 'min',
      },
    ],
  },
  {
    title: 'Checks of probes and water',
    intro: 'When a check is due again, which water may be used, and when a probe at a reference has settled.',
    fields: [
      {
        path: 'checks.probeMonths',
        label: 'A probe check holds for',
        hint: 'Each check may be given another date.',
        kind: 'number',
        unit: 'months',
      },
      {
        path: 'checks.waterMonths',
        label: 'A water check holds for',
        hint: 'Each check may be given another date.',
        kind: 'number',
        unit: 'months',
      },
      {
        path: 'checks.dueSoonDays',
        label: 'Due soon means within',
        hint: 'Shown on the page Probes.',
        kind: 'number',
        unit: 'days',
      },
      {
        path: 'checks.waterTcaMaxNgPerL',
        label: 'Most TCA in water',
        hint: 'Water above it is not used. Practice varies.',
        kind: 'number',
        unit: 'ng/L',
        decimals: 2,
      },
      {
        path: 'checks.waterFreeChlorineMaxMgPerL',
        label: 'Most free chlorine in water',
        hint: 'Water above it is not used: chlorine and wood make taint. Common practice.',
        kind: 'number',
        unit: 'mg/L',
        decimals: 3,
      },
      {
        path: 'checks.settleWindowS',
        label: 'A probe has settled when, over',
        hint: 'The last seconds that are looked at.',
        kind: 'number',
        unit: 's',
      },
      {
        path: 'checks.settleSdC',
        label: 'its readings scatter by no more than',
        hint: 'Standard deviation.',
        kind: 'difference',
        decimals: 2,
      },
      {
        path: 'checks.settleSlopeCPerMin',
        label: 'and drift in a minute by no more than',
        hint: 'Slope of the straight line through them.',
        kind: 'difference',
        decimals: 2,
      },
    ],
  },
]
