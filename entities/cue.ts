import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const CueEntity = defineEntity({
  name: 'Cue',
  tableName: 'cues',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    stageId: p.uuid(),
    position: p.integer(),
    action: p.enum(['stir', 'feed', 'mist', 'lid on', 'lid off', 'turn', 'turn over', 'look']),
    minute: p.double(),
    words: p.text().default(''),
  },
})

export type Cue = InferEntity<typeof CueEntity>
