import { violatedConstraint } from '@/lib/db/database-errors'
import { invalidField } from '@/lib/errors'

/** The database holds one live firing a hearth, a piece and a probe; its refusal in words. */
export function explainClash(error: unknown): never {
  const constraint = violatedConstraint(error)
  if (constraint === 'one_firing_per_hearth') {
    throw invalidField('hearthId', 'A firing stands on this hearth already. Choose a free one.')
  }
  if (constraint === 'firings_one_live_per_piece') {
    throw invalidField('pieceId', 'This piece is over a fire already.')
  }
  if (constraint === 'one_firing_per_probe') {
    throw invalidField('probes', 'One of these probes reads another firing. Choose another.')
  }
  throw error
}
