import { parseDecimal } from '@/lib/format'
import type { Cue } from '@/lib/recipes/schema'
import { cueActions } from '@/lib/recipes/schema'

/**
 * Cues as one line that can be typed: "feed at 6; lid on at 11 "two billets"; turn over first". Minutes count from the
 * stage's start; "first" is minute 0 and may be left out. Words stand in double quotes, with \" and \\ inside.
 */
export type ParsedCues = { cues: Cue[]; fault: null } | { cues: null; fault: string }

const actionList = cueActions.join(', ')
const actionsLongestFirst = [...cueActions].sort((a, b) => b.length - a.length)

/** The line of a stage's cues; {@link parseCues} is its inverse. */
export function printCues(cues: readonly Cue[]): string {
  return cues.map(printCue).join('; ')
}

function printCue(cue: Cue): string {
  const when = cue.minute === 0 ? 'first' : `at ${cue.minute}`
  const words = cue.words === '' ? '' : ` "${cue.words.replaceAll(/["\\]/g, (mark) => `\\${mark}`)}"`
  return `${cue.action} ${when}${words}`
}

/** Reads a typed line of cues, or says in a sentence what is not understood. An empty line is no cues. */
export function parseCues(text: string): ParsedCues {
  const cues: Cue[] = []
  for (const part of splitCues(text)) {
    const cue = parseCue(part)
    if (typeof cue === 'string') return { cues: null, fault: cue }
    cues.push(cue)
  }
  return { cues, fault: null }
}

/** The parts between semicolons that stand outside quotes. */
function splitCues(text: string): string[] {
  const parts = text.match(/(?:"(?:\\[\s\S]|[^"\\])*"|[^;])+/g) ?? []
  return parts.map((part) => part.trim()).filter((part) => part !== '')
}

function parseCue(part: string): Cue | string {
  const action = actionsLongestFirst.find((known) => new RegExp(`^${known}(?![a-z])`, 'i').test(part))
  if (action === undefined) {
    return `“${part}” does not begin with an action. Write one of ${actionList}, then its minute: feed at 6.`
  }
  const rest = part.slice(action.length).trim()
  const match = /^(first|at\s+(\S+?))?\s*(?:"((?:\\[\s\S]|[^"\\])*)")?$/i.exec(rest)
  if (match === null) {
    return `“${part}” is not understood after ${action}. Write its minute, and words in quotes: ${action} at 6 "slowly".`
  }
  const minute = match[2] === undefined ? 0 : parseMinute(match[2])
  if (minute === null)
    return `“${match[2] ?? ''}” is no minute. Write ${action} at 6, counted from the stage's start.`
  return { action, minute, words: (match[3] ?? '').replaceAll(/\\([\s\S])/g, '$1') }
}

/** "6", "6.5", "6,5" or, for the very small ones that print so, "1e-7". */
function parseMinute(typed: string): number | null {
  if (/^\d+(\.\d+)?e-\d+$/i.test(typed)) return Number(typed)
  return parseDecimal(typed)
}
