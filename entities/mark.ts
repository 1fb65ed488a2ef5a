import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const MarkEntity = defineEntity({
  name: 'Mark',
  tableName: 'marks',
  properties: {
    id: p.uuid().primary(),
    firingId: p.uuid(),
    kind: p.enum([
      'phase',
      'stage',
      'pull',
      'stir',
      'feed',
      'mist',
      'lid on',
      'lid off',
      'turn',
      'turn over',
      'call',
      'note',
      'swap',
      'undone',
      'reason',
      'advice',
      'move',
    ]),
    at: p.datetime(),
    recordedAt: p.datetime(),
    accountId: p.uuid(),
    phase: p.enum(['preheating', 'bending', 'toasting', 'resting']).nullable(),
    stagePosition: p.integer().nullable(),
    call: p.enum(['early', 'right', 'late']).nullable(),
    words: p.text().default(''),
    replacesId: p.uuid().nullable(),
    swapRole: p.enum(['lead', 'opposite', 'coals']).nullable(),
    fromProbeId: p.uuid().nullable(),
    toProbeId: p.uuid().nullable(),
    step: p.enum(['preheat', 'bend', 'stage', 'rest']).nullable(),
    answer: p.enum(['taken', 'not now']).nullable(),
    fromHearthId: p.uuid().nullable(),
    toHearthId: p.uuid().nullable(),
  },
})

export type Mark = InferEntity<typeof MarkEntity>
