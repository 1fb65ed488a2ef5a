import type { CustomerDto } from '@/lib/accounts/schema'

export type CustomerRow = {
  id: string
  name: string
  contact_email: string | null
  created_at: Date | string
}

export function toCustomer(row: CustomerRow): CustomerDto {
  return {
    id: row.id,
    name: row.name,
    contactEmail: row.contact_email,
    createdAt: new Date(row.created_at).toISOString(),
  }
}
