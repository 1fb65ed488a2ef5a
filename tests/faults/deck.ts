/** What the suite does to the system, in the order of its table. */
export const faultKinds = [
  'server killed',
  'PostgreSQL killed',
  'gateway killed',
  'disk full',
  'network cut',
  'network slow',
  'network held',
  'answers lost',
  'disk slow',
  'batches doubled',
  'batches reordered',
  'batches late',
  'clock set',
  'token revoked',
] as const
export type FaultKind = (typeof faultKinds)[number]
export type FaultCounts = Record<FaultKind, number>

/** Something for each kind of fault. */
export function byFault<T>(make: (kind: FaultKind) => T): Record<FaultKind, T> {
  return {
    'server killed': make('server killed'),
    'PostgreSQL killed': make('PostgreSQL killed'),
    'gateway killed': make('gateway killed'),
    'disk full': make('disk full'),
    'network cut': make('network cut'),
    'network slow': make('network slow'),
    'network held': make('network held'),
    'answers lost': make('answers lost'),
    'disk slow': make('disk slow'),
    'batches doubled': make('batches doubled'),
    'batches reordered': make('batches reordered'),
    'batches late': make('batches late'),
    'clock set': make('clock set'),
    'token revoked': make('token revoked'),
  }
}

export function noCounts(): FaultCounts {
  return byFault(() => 0)
}

/** `kills` of each of the three programs, as many full disks and cuts as a fifth of that, and some of the rest. */
export function countsOf(kills: number): FaultCounts {
  const fifth = Math.max(1, Math.round(kills / 5))
  const some = Math.max(1, Math.round(kills / 12))
  return byFault((kind) => {
    if (kind.endsWith('killed')) return kills
    return kind === 'disk full' || kind === 'network cut' ? fifth : some
  })
}

/** Faults that come together. */
export type Episode = readonly FaultKind[]

/** Of so many episodes one has two faults at once. */
const pairOneIn = 3

/** Every fault as often as it is to come, in an order of chance; now and then two of different kinds at once. */
export function shuffledDeck(counts: FaultCounts, random: () => number): Episode[] {
  const faults = faultKinds.flatMap((kind) => new Array<FaultKind>(counts[kind]).fill(kind))
  for (let i = faults.length - 1; i > 0; i -= 1) {
    const j = Math.floor(random() * (i + 1))
    const [a, b] = [faults[i], faults[j]]
    if (a !== undefined && b !== undefined) [faults[i], faults[j]] = [b, a]
  }
  const deck: Episode[] = []
  for (let first = faults.shift(); first !== undefined; first = faults.shift()) {
    const isPair = faults[0] !== first && random() < 1 / pairOneIn
    const second = isPair ? faults.shift() : undefined
    deck.push(second === undefined ? [first] : [first, second])
  }
  return deck
}
