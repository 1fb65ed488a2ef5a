import { randomUUID } from 'node:crypto'
import type { EntityManager } from '@mikro-orm/postgresql'
import { queryRows } from '@/lib/db/orm'
import type { RecipeContent, RecipeStage } from '@/lib/recipes/schema'

/** The columns of a version that its content fills. */
export function contentColumns(content: RecipeContent) {
  return {
    pieceKind: content.pieceKind,
    sizeAndShape: content.sizeAndShape,
    thicknessMm: content.thicknessMm,
    leadHeight: content.leadPlace.height,
    leadSide: content.leadPlace.side,
    leadDepthMm: content.leadPlace.depthMm,
    leadMounting: content.leadPlace.mounting,
    moistureMinPercent: content.preheat.moistureMinPercent,
    moistureMaxPercent: content.preheat.moistureMaxPercent,
    preheatWaterTempC: content.preheat.waterTempC,
    preheatMethod: content.preheat.method,
    preheatMinutes: content.preheat.minutes,
    bendMinimumMinutes: content.bend.minimumMinutes,
    bendWoodLimitC: content.bend.woodLimitC,
    planStartTempC: content.planStartTempC,
    doseTargetMinutes: content.doseTargetMinutes,
    doseToleranceLog10: content.doseToleranceLog10,
    woodMaximumC: content.limits.woodMaximumC,
    climbMaximumCPerMin: content.limits.climbMaximumCPerMin,
    spreadLimitC: content.limits.spreadC,
    restMinutes: content.restMinutes,
    flavourIntent: content.flavourIntent,
    notes: content.notes,
  }
}

/** Writes a draft's stages and cues anew, in their order. The version's own row must be there. */
export async function replaceStages(
  em: EntityManager,
  versionId: string,
  stages: readonly RecipeStage[],
): Promise<void> {
  const stageRows = stages.map((stage, index) => ({ ...stage, id: randomUUID(), position: index + 1 }))
  const cueRows = stageRows.flatMap((stage) =>
    stage.cues.map((cue, index) => ({ ...cue, stageId: stage.id, position: index + 1 })),
  )
  await queryRows(em, 'delete from stages where version_id = ?', [versionId])
  await queryRows(
    em,
    `insert into stages (id, version_id, position, name, kind, target_temp_c, coals_target_temp_c, minutes, band_c, lid)
     select s.id, ?, s.position, s.name, s.kind, s."targetTempC", s."coalsTargetTempC", s.minutes, s."bandC", s.lid
       from jsonb_to_recordset(?::jsonb) as s (id uuid, position integer, name text, kind text,
         "targetTempC" float8, "coalsTargetTempC" float8, minutes float8, "bandC" float8, lid text)`,
    [versionId, JSON.stringify(stageRows)],
  )
  if (cueRows.length === 0) return
  await queryRows(
    em,
    `insert into cues (stage_id, position, action, minute, words)
     select c."stageId", c.position, c.action, c.minute, c.words
       from jsonb_to_recordset(?::jsonb) as c ("stageId" uuid, position integer, action text, minute float8, words text)`,
    [JSON.stringify(cueRows)],
  )
}
