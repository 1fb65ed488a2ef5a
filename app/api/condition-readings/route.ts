import { operations } from '@/lib/conditions/operations'
import { recordAir } from '@/lib/conditions/record-air'
import { route } from '@/lib/http/route'

export const POST = route(operations.recordAir, (actor, { body }) => recordAir(actor, body))
