import { inspectLink } from '@/lib/accounts/inspect-link'
import { operations } from '@/lib/accounts/operations'
import { openRoute } from '@/lib/http/route'

export const POST = openRoute(operations.inspectLink, ({ body }) => inspectLink(body))
