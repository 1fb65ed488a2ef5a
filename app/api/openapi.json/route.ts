import { env } from '@/lib/env'
import { buildOpenApi } from '@/lib/http/openapi'
import { operations } from '@/lib/http/operations'
import { openRoute } from '@/lib/http/route'

export const dynamic = 'force-dynamic'

export const GET = openRoute(operations.getOpenApi, async () => buildOpenApi(env().APP_ORIGIN))
