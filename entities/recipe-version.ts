import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const RecipeVersionEntity = defineEntity({
  name: 'RecipeVersion',
  tableName: 'recipe_versions',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    recipeId: p.uuid(),
    number: p.integer(),
    state: p.enum(['draft', 'in review', 'approved', 'superseded', 'withdrawn']).default('draft'),
    revision: p.integer().default(1),
    authorId: p.uuid(),
    basedOnVersionId: p.uuid().nullable(),
    pieceKind: p.enum(['barrel', 'head']),
    sizeAndShape: p.text(),
    thicknessMm: p.double(),
    leadHeight: p.enum(['bilge', 'quarter', 'head end', 'head']),
    leadSide: p.text(),
    leadDepthMm: p.double(),
    leadMounting: p.enum(['wedge', 'drilled', 'clamped']),
    moistureMinPercent: p.double(),
    moistureMaxPercent: p.double(),
    preheatWaterTempC: p.double(),
    preheatMethod: p.enum(['spray', 'immersion', 'steam', 'none']),
    preheatMinutes: p.double(),
    bendMinimumMinutes: p.double(),
    bendWoodLimitC: p.double(),
    planStartTempC: p.double(),
    doseTargetMinutes: p.double().nullable(),
    doseToleranceLog10: p.double(),
    woodMaximumC: p.double(),
    climbMaximumCPerMin: p.double().name('climb_maximum_c_per_min'),
    spreadLimitC: p.double(),
    restMinutes: p.double(),
    flavourIntent: p.text().default(''),
    notes: p.text().default(''),
    createdAt: p.datetime(),
    updatedAt: p.datetime(),
    sentAt: p.datetime().nullable(),
    returnedAt: p.datetime().nullable(),
    returnedBy: p.uuid().nullable(),
    returnReason: p.text().nullable(),
    approvedAt: p.datetime().nullable(),
    approvedBy: p.uuid().nullable(),
    supersededAt: p.datetime().nullable(),
    withdrawnAt: p.datetime().nullable(),
    withdrawnBy: p.uuid().nullable(),
    withdrawReason: p.text().nullable(),
  },
})

export type RecipeVersion = InferEntity<typeof RecipeVersionEntity>
