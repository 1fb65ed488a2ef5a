import { operations } from '@/lib/audit/operations'
import { verifyChain } from '@/lib/audit/verify-chain'
import { route } from '@/lib/http/route'

export const GET = route(operations.verifyAuditChain, (actor) => verifyChain(actor))
