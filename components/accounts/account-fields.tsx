'use client'

import { SelectField } from '@/components/ui/select-field'
import { TextField } from '@/components/ui/text-field'
import type { CustomerDto } from '@/lib/accounts/schema'
import type { Role } from '@/lib/auth/actor'
import { ApiProblem, callApi, isApiProblem } from '@/lib/http/api-client'

export type AccountDraft = {
  email: string
  name: string
  role: Role | ''
  /** A customer's id, '' for none chosen, or 'new'. */
  customerId: string
  newCustomerName: string
}

export type CustomerChoice = { id: string; name: string }

export const roleHints: Record<Role, string> = {
  administrator: 'Accounts, hearths, gateways, probes, settings; reads everything, fires nothing.',
  'master cooper': 'Approves, plans, fires, decides and signs; adds customers; reads the audit trail.',
  chemist: 'Writes recipes and sends them for approval; enters lab results; fires trials.',
  toaster: 'Fires barrels and keeps probe and water checks.',
  customer: 'Follows the orders of one customer, and nothing else.',
}

export const accountLabels = {
  email: 'E-mail',
  name: 'Name',
  role: 'Role',
  customerId: 'Customer',
  newCustomerName: 'New customer',
}

const roleOptions = (['administrator', 'master cooper', 'chemist', 'toaster', 'customer'] as const).map(
  (role) => ({ value: role, label: role }),
)

/** Name, role and, for a customer's person, the customer. */
export function AccountFields({
  draft,
  onDraft,
  customers,
  fields,
}: {
  draft: AccountDraft
  onDraft: (draft: AccountDraft) => void
  customers: readonly CustomerChoice[]
  fields: Readonly<Record<string, string>> | undefined
}) {
  const change = (part: Partial<AccountDraft>) => onDraft({ ...draft, ...part })
  const customerOptions = [
    ...customers.map(({ id, name }) => ({ value: id, label: name })),
    { value: 'new', label: 'A new customer …' },
  ]
  return (
    <>
      <TextField
        name="name"
        label="Name"
        autoComplete="off"
        value={draft.name}
        onChange={(event) => change({ name: event.target.value })}
        error={fields?.name}
      />
      <SelectField
        name="role"
        label="Role"
        placeholder="Choose a role"
        options={roleOptions}
        hint={draft.role === '' ? undefined : roleHints[draft.role]}
        value={draft.role}
        onChange={(event) => change({ role: readRole(event.target.value) })}
        error={fields?.role}
      />
      {draft.role === 'customer' ? (
        <SelectField
          name="customerId"
          label="Customer"
          placeholder="Choose a customer"
          options={customerOptions}
          value={draft.customerId}
          onChange={(event) => change({ customerId: event.target.value })}
          error={fields?.customerId}
        />
      ) : null}
      {draft.role === 'customer' && draft.customerId === 'new' ? (
        <TextField
          name="newCustomerName"
          label="Name of the new customer"
          value={draft.newCustomerName}
          onChange={(event) => change({ newCustomerName: event.target.value })}
          error={fields?.newCustomerName}
        />
      ) : null}
    </>
  )
}

function readRole(text: string): Role | '' {
  return roleOptions.find((option) => option.value === text)?.value ?? ''
}

/** The role and customer as the server takes them; makes the new customer first, and remembers it in the draft. */
export async function roleBody(draft: AccountDraft, onDraft: (draft: AccountDraft) => void) {
  if (draft.role !== 'customer') return { role: draft.role }
  if (draft.customerId !== 'new') {
    return { role: draft.role, customerId: draft.customerId === '' ? null : draft.customerId }
  }
  const customer = await createCustomer(draft.newCustomerName)
  onDraft({ ...draft, customerId: customer.id })
  return { role: draft.role, customerId: customer.id }
}

/** The customer's fault belongs to the customer's own field, not to the person's name. */
async function createCustomer(name: string): Promise<CustomerDto> {
  try {
    return await callApi<CustomerDto>('POST', '/api/customers', { body: { name } })
  } catch (error) {
    if (!isApiProblem(error)) throw error
    const { name: sentence, ...others } = error.problem.fields
    if (sentence === undefined) throw error
    throw new ApiProblem({ ...error.problem, fields: { ...others, newCustomerName: sentence } })
  }
}
