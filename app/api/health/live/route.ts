import { openRoute } from '@/lib/http/route'
import { operations } from '@/lib/ingest/operations'

export const dynamic = 'force-dynamic'

export const GET = openRoute(operations.healthLive, async () => ({ status: 'ok' }))
