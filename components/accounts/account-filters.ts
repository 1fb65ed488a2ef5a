import { roles } from '@/lib/auth/actor'

const asOption = (value: string) => ({ value, label: value })

/** The choices above the account table. */
export const accountFilters = [
  {
    name: 'role',
    label: 'Role',
    fallback: '',
    options: [{ value: '', label: 'any role' }, ...roles.map(asOption)],
  },
  {
    name: 'state',
    label: 'State',
    fallback: '',
    options: [{ value: '', label: 'any state' }, ...['active', 'invited', 'closed'].map(asOption)],
  },
]
