import { createHash } from 'node:crypto'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { now } from '@/lib/runtime'
import type { ChainDto } from '@/lib/audit/schema'

type LinkRow = { seq: string; previous_hash: string; hash: string; payload: string }

const pageSize = 2_000
const beforeFirst = '0'.repeat(64)

/** An entry noted elsewhere earlier (on paper, in a backup's log): finds a trail that was cut short or made anew. */
export type Anchor = { seq: number; hash: string }

/**
 * Walks the whole trail in order: each entry is numbered one higher than the one before, names its hash, and its own
 * hash is the SHA-256 of its JSON text, computed here and not in the database. The first entry that does not hold is
 * named. A trail whose last entries were removed whole still holds in itself; only an anchor finds that.
 */
export async function verifyChain(actor: Actor, anchor: Anchor | null = null): Promise<ChainDto> {
  requirePermission(actor, 'audit:read')
  const em = await forkEm()
  let last = { seq: 0, hash: beforeFirst }
  let anchorHolds = anchor === null
  for (;;) {
    const rows = await queryRows<LinkRow>(
      em,
      `select e.seq, e.previous_hash, e.hash, audit_payload(e) as payload
         from audit_entries e where e.seq > ? order by e.seq limit ?`,
      [last.seq, pageSize],
    )
    for (const row of rows) {
      if (!holds(row, last)) return answer(last, last.seq + 1)
      last = { seq: Number(row.seq), hash: row.hash }
      if (anchor !== null && anchor.seq === last.seq) {
        if (anchor.hash !== last.hash) return answer(last, last.seq)
        anchorHolds = true
      }
    }
    if (rows.length < pageSize) return answer(last, anchorHolds ? null : last.seq + 1)
  }
}

function holds(row: LinkRow, last: { seq: number; hash: string }): boolean {
  const hash = createHash('sha256').update(row.payload, 'utf8').digest('hex')
  return Number(row.seq) === last.seq + 1 && row.previous_hash === last.hash && row.hash === hash
}

function answer(last: { seq: number; hash: string }, firstBrokenSeq: number | null): ChainDto {
  return {
    entries: last.seq,
    isIntact: firstBrokenSeq === null,
    firstBrokenSeq,
    lastHash: last.hash,
    verifiedAt: now().toISOString(),
  }
}
