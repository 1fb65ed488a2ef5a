import { openRoute } from '@/lib/http/route'
import { checkReady } from '@/lib/ingest/check-health'
import { operations } from '@/lib/ingest/operations'

export const dynamic = 'force-dynamic'

export const GET = openRoute(operations.healthReady, () => checkReady())
