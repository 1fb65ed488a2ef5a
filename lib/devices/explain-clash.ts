import { violatedConstraint } from '@/lib/db/database-errors'
import { invalidField } from '@/lib/errors'

/** What the database refuses of a device's particulars, beside the field that it is about. */
export function explainClash(error: unknown): never {
  const constraint = violatedConstraint(error)
  if (constraint === 'devices_name_key') {
    throw invalidField('name', 'Another device in use has this name. Take another.')
  }
  if (constraint === 'devices_hearth_id_fkey') throw invalidField('hearthId', 'There is no such hearth.')
  throw error
}
