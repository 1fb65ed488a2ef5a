import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const SiteSettingsEntity = defineEntity({
  name: 'SiteSettings',
  tableName: 'site_settings',
  properties: {
    version: p.integer().primary(),
    name: p.text(),
    serialPrefix: p.text(),
    timeZone: p.text(),
    rules: p.json<unknown>(),
    room: p.json<unknown>(),
    isDemo: p.boolean().default(false),
    createdAt: p.datetime(),
    createdBy: p.uuid().nullable(),
  },
})

export type SiteSettings = InferEntity<typeof SiteSettingsEntity>
