import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const SignInThrottleEntity = defineEntity({
  name: 'SignInThrottle',
  tableName: 'sign_in_throttles',
  properties: {
    key: p.text().primary(),
    failures: p.integer(),
    windowStartedAt: p.datetime(),
    blockedUntil: p.datetime().nullable(),
  },
})

export type SignInThrottle = InferEntity<typeof SignInThrottleEntity>
