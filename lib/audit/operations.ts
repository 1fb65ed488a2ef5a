import { auditPageSchema, auditQuery, chainSchema } from '@/lib/audit/schema'
import { rolesWith } from '@/lib/auth/permissions'
import { defineOperation } from '@/lib/http/operation'

export const operations = {
  listAuditEntries: defineOperation({
    id: 'listAuditEntries',
    method: 'GET',
    path: '/api/audit-entries',
    summary: 'The audit trail, newest first, by person, action, subject and days',
    tag: 'Audit',
    access: rolesWith('audit:read'),
    query: auditQuery,
    response: auditPageSchema,
  }),
  verifyAuditChain: defineOperation({
    id: 'verifyAuditChain',
    method: 'GET',
    path: '/api/audit-chain',
    summary: 'Hash the whole trail again and say whether it holds',
    tag: 'Audit',
    access: rolesWith('audit:read'),
    response: chainSchema,
  }),
}
