import type { MarkDto, MarkKind } from '@/lib/firings/schema'

export type MarkRow = {
  id: string
  kind: MarkKind
  at: Date
  recorded_at: Date
  account_name: string
  phase: 'preheating' | 'bending' | 'toasting' | 'resting' | null
  stage_position: number | null
  call: 'early' | 'right' | 'late' | null
  words: string
  step: MarkDto['step']
  answer: MarkDto['answer']
  replaces_id: string | null
}

export const markSelect = `
  select m.id, m.kind, m.at, m.recorded_at, a.name as account_name, m.phase, m.stage_position, m.call, m.words,
         m.step, m.answer, m.replaces_id
    from marks m join accounts a on a.id = m.account_id`

/** Marks with what is in force: not replaced or undone by a later one, and not itself an undoing. */
export function toMarks(rows: readonly MarkRow[]): MarkDto[] {
  const replaced = new Set(rows.flatMap((row) => (row.replaces_id === null ? [] : [row.replaces_id])))
  return rows.map((row) => ({
    id: row.id,
    kind: row.kind,
    at: new Date(row.at).toISOString(),
    recordedAt: new Date(row.recorded_at).toISOString(),
    by: row.account_name,
    phase: row.phase,
    stagePosition: row.stage_position,
    call: row.call,
    words: row.words,
    step: row.step,
    answer: row.answer,
    replacesId: row.replaces_id,
    isInForce: row.kind !== 'undone' && !replaced.has(row.id),
  }))
}
