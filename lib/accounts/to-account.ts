import type { Role } from '@/lib/auth/actor'
import type { AccountDto } from '@/lib/accounts/schema'

/** One row an account, with its customer, its last use and its newest invitation that still serves. Takes one `?`: now. */
export const accountSelect = `
  select a.id, a.email, a.name, lower(a.name) as sort_name, a.role, a.customer_id, c.name as customer_name, a.state, a.created_at, a.revision,
         (select max(s.last_seen_at) from sessions s where s.account_id = a.id and s.ended_at is null) as last_seen_at,
         (select max(l.expires_at) from account_links l
           where l.account_id = a.id and l.purpose = 'invitation' and l.used_at is null and l.expires_at > ?)
           as invitation_until
    from accounts a left join customers c on c.id = a.customer_id`

export type AccountRow = {
  id: string
  email: string
  name: string
  sort_name: string
  role: Role
  customer_id: string | null
  customer_name: string | null
  state: 'invited' | 'active' | 'closed'
  created_at: Date | string
  revision: number
  last_seen_at: Date | string | null
  invitation_until: Date | string | null
}

function toInstant(at: Date | string | null): string | null {
  return at === null ? null : new Date(at).toISOString()
}

export function toAccount(row: AccountRow): AccountDto {
  return {
    id: row.id,
    email: row.email,
    name: row.name,
    role: row.role,
    customer: row.customer_id === null ? null : { id: row.customer_id, name: row.customer_name ?? '' },
    state: row.state,
    createdAt: new Date(row.created_at).toISOString(),
    lastSeenAt: toInstant(row.last_seen_at),
    invitationUntil: row.state === 'invited' ? toInstant(row.invitation_until) : null,
    revision: row.revision,
  }
}
