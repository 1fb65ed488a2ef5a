import { listEntries } from '@/lib/audit/list-entries'
import { operations } from '@/lib/audit/operations'
import { route } from '@/lib/http/route'

export const GET = route(operations.listAuditEntries, (actor, call) => listEntries(actor, call.query))
