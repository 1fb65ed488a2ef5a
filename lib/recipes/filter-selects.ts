import type { Role } from '@/lib/auth/actor'
import { rolesWith } from '@/lib/auth/permissions'
import { pieceKinds, versionStates } from '@/lib/recipes/schema'

type Option = { value: string; label: string }
type FilterSelect = { name: string; label: string; fallback: string; options: Option[] }

function select(name: string, label: string, any: string, options: readonly Option[]): FilterSelect {
  return { name, label, fallback: '', options: [{ value: '', label: any }, ...options] }
}

/** The choices over the list of recipes; those who see approved versions only are not asked for a state. */
export function filterSelects(customers: readonly Option[], role: Role): FilterSelect[] {
  const toOptions = (values: readonly string[]) => values.map((value) => ({ value, label: value }))
  const seesAll = rolesWith('recipes:read unapproved').includes(role)
  return [
    ...(seesAll ? [select('state', 'Has a version', 'in any state', toOptions(versionStates))] : []),
    select('pieceKind', 'Piece', 'any', toOptions(pieceKinds)),
    ...(customers.length > 0 ? [select('customerId', 'Customer', 'any', customers)] : []),
  ]
}
