/** PRODUCT "Cautions", in place. The app advises; it neither controls a fire nor clears anyone to work. */

const follow = 'Follow local code and the responsible person.'

export const cautions = {
  bend: `Stand clear of the cable and of hoops under tension. ${follow}`,
  lid: `Lifting a lid can flash hot smoke: stand aside. ${follow}`,
  mist: `Mist the wood, never the coals: steam burns. ${follow}`,
  turnOver: `Two people or a hoist for a hot barrel. ${follow}`,
  noReading: `The barrel may still be overheating: look at it. ${follow}`,
  rest: `Look for glowing joints; keep the site’s fire watch after the last fire. ${follow}`,
} as const

/** The caution of an action, by its words: a mark's kind, or what comes next. */
export function cautionFor(words: string): string | null {
  if (/\blid (on|off)\b/.test(words)) return cautions.lid
  if (/\bmist\b/i.test(words)) return cautions.mist
  if (/\bturn over\b/.test(words)) return cautions.turnOver
  return null
}

/** The start list, each to be ticked by a person; water and probes are added with their dates. */
export const startList = [
  { id: 'extraction', words: 'Extraction is running.', more: '' },
  {
    id: 'carbon-monoxide',
    words: 'A carbon monoxide alarm is worn.',
    more: 'Its alarm, not this screen, is the order to leave. An 8-hour mean is no alarm.',
  },
  { id: 'fire-watch', words: 'Fire watch kept, extinguisher at hand.', more: '' },
  { id: 'not-alone', words: 'Nobody works alone.', more: '' },
  { id: 'gloves', words: 'Gloves on.', more: '' },
] as const

export const followLocalCode = follow
