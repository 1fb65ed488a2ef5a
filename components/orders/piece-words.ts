import type { PieceDto } from '@/lib/batches/schema'

/** Where a piece is on its way, in a customer's words. */
export function pieceWords(piece: PieceDto): string {
  if (piece.firing === null) return 'not begun'
  const words = {
    queued: 'waits for a hearth',
    preheating: 'at the hearth: preheating',
    bending: 'at the hearth: bending',
    toasting: 'at the hearth: toasting',
    resting: 'at the hearth: resting',
    finished: 'toasted',
    abandoned: 'fire broken off; the cooperage looks at it',
  } as const
  return words[piece.firing.state]
}
