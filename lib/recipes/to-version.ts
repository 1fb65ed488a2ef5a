import { contentSha256 } from '@/lib/recipes/content-sha256'
import { planOf } from '@/lib/recipes/plan-of'
import type { RecipeContent, RecipeStage, RecipeVersionDto, VersionState } from '@/lib/recipes/schema'
import type { DoseModel } from '@/lib/science/heat-dose'

/** One row of `versionSelect`. Instants come as PostgreSQL's text. */
export type VersionRow = {
  id: string
  recipe_id: string
  recipe_name: string
  number: number
  state: VersionState
  revision: number
  author_id: string
  author_name: string
  based_on_version_id: string | null
  piece_kind: RecipeContent['pieceKind']
  size_and_shape: string
  thickness_mm: number
  lead_height: RecipeContent['leadPlace']['height']
  lead_side: string
  lead_depth_mm: number
  lead_mounting: RecipeContent['leadPlace']['mounting']
  moisture_min_percent: number
  moisture_max_percent: number
  preheat_water_temp_c: number
  preheat_method: RecipeContent['preheat']['method']
  preheat_minutes: number
  bend_minimum_minutes: number
  bend_wood_limit_c: number
  plan_start_temp_c: number
  dose_target_minutes: number | null
  dose_tolerance_log10: number
  wood_maximum_c: number
  climb_maximum_c_per_min: number
  spread_limit_c: number
  rest_minutes: number
  flavour_intent: string
  notes: string
  created_at: string
  updated_at: string
  sent_at: string | null
  approved_at: string | null
  approved_by_name: string | null
  superseded_at: string | null
  returned_at: string | null
  returned_by_name: string | null
  return_reason: string | null
  withdrawn_at: string | null
  withdrawn_by_name: string | null
  withdraw_reason: string | null
  stages: RecipeStage[]
  signatures: { name: string; role: string; meaning: string; reason: string | null; signedAt: string }[]
}

function instant(at: string): string {
  return new Date(at).toISOString()
}

function instantOrNull(at: string | null): string | null {
  return at === null ? null : instant(at)
}

/** What a version says, from its row. */
export function toContent(row: VersionRow): RecipeContent {
  return {
    pieceKind: row.piece_kind,
    sizeAndShape: row.size_and_shape,
    thicknessMm: row.thickness_mm,
    leadPlace: {
      height: row.lead_height,
      side: row.lead_side,
      depthMm: row.lead_depth_mm,
      mounting: row.lead_mounting,
    },
    preheat: {
      moistureMinPercent: row.moisture_min_percent,
      moistureMaxPercent: row.moisture_max_percent,
      waterTempC: row.preheat_water_temp_c,
      method: row.preheat_method,
      minutes: row.preheat_minutes,
    },
    bend: { minimumMinutes: row.bend_minimum_minutes, woodLimitC: row.bend_wood_limit_c },
    planStartTempC: row.plan_start_temp_c,
    stages: row.stages.map(toStage),
    doseTargetMinutes: row.dose_target_minutes,
    doseToleranceLog10: row.dose_tolerance_log10,
    limits: {
      woodMaximumC: row.wood_maximum_c,
      climbMaximumCPerMin: row.climb_maximum_c_per_min,
      spreadC: row.spread_limit_c,
    },
    restMinutes: row.rest_minutes,
    flavourIntent: row.flavour_intent,
    notes: row.notes,
  }
}

function toStage(stage: RecipeStage): RecipeStage {
  return {
    name: stage.name,
    kind: stage.kind,
    targetTempC: stage.targetTempC,
    coalsTargetTempC: stage.coalsTargetTempC,
    minutes: stage.minutes,
    bandC: stage.bandC,
    lid: stage.lid,
    cues: stage.cues.map((cue) => ({ action: cue.action, minute: cue.minute, words: cue.words })),
  }
}

/** A version as it leaves the server; `model` is the site's, for the dose of its plan. */
export function toVersion(row: VersionRow, model: DoseModel): RecipeVersionDto {
  const content = toContent(row)
  const plan = planOf(content, model)
  return {
    id: row.id,
    recipeId: row.recipe_id,
    recipeName: row.recipe_name,
    number: row.number,
    state: row.state,
    revision: row.revision,
    author: { id: row.author_id, name: row.author_name },
    basedOnVersionId: row.based_on_version_id,
    content,
    planDoseMinutes: plan.doseMin,
    targetDoseMinutes: plan.targetDoseMin,
    totalMinutes: plan.totalS / 60,
    createdAt: instant(row.created_at),
    updatedAt: instant(row.updated_at),
    sentAt: instantOrNull(row.sent_at),
    approvedAt: instantOrNull(row.approved_at),
    approvedBy: row.approved_by_name,
    supersededAt: instantOrNull(row.superseded_at),
    returnedAt: instantOrNull(row.returned_at),
    returnedBy: row.returned_by_name,
    returnReason: row.return_reason,
    withdrawnAt: instantOrNull(row.withdrawn_at),
    withdrawnBy: row.withdrawn_by_name,
    withdrawReason: row.withdraw_reason,
    contentSha256: contentSha256(content),
    signatures: row.signatures.map((signature) => ({ ...signature, signedAt: instant(signature.signedAt) })),
  }
}
