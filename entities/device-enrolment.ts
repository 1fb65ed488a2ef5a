import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const DeviceEnrolmentEntity = defineEntity({
  name: 'DeviceEnrolment',
  tableName: 'device_enrolments',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    deviceId: p.uuid(),
    codeSha256: p.text(),
    createdAt: p.datetime(),
    createdBy: p.uuid(),
    expiresAt: p.datetime(),
    cancelledAt: p.datetime().nullable(),
    usedAt: p.datetime().nullable(),
    /** The address that it was typed at. */
    usedFrom: p.text().nullable(),
  },
})

export type DeviceEnrolment = InferEntity<typeof DeviceEnrolmentEntity>
