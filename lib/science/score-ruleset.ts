/**
 * Ruleset 1, whole, as data (SCIENCE §5). A ruleset is never edited: a change is a new number beside it, and a score
 * names the one it was made with. `noLoss…` and `allLost…` are the two ends between which points fall in a straight
 * line; with `Times` they are multiples of what the recipe sets.
 */
export const ruleset1 = {
  number: 1,
  /** Only wood above this counts for band and shape, °C: wet wood lingers near 100 °C and is not punished for it. */
  countFromTempC: 120,
  /** On a ramp the band is the wider of ±°C and this long either way along time, min. */
  rampBandMin: 2,
  terms: {
    dose: { name: 'Dose', unit: 'log10', noLossTimes: 1, allLostTimes: 3, points: 45 },
    inBand: { name: 'In band', unit: 'percent', noLoss: 90, allLost: 40, points: 15 },
    shape: { name: 'Shape', unit: 'bands', noLoss: 1, allLost: 3, points: 10 },
    stageLengths: { name: 'Stage lengths', unit: 'percent', noLoss: 10, allLost: 50, points: 10 },
    spread: {
      name: 'Spread',
      unit: 'differenceC',
      noLossTimes: 1,
      allLostTimes: 3,
      points: 10,
      /** Both probes must have been read for this share of the toast. */
      leastCoveredShare: 0.5,
    },
    preheatAndBend: {
      name: 'Preheat and bend',
      unit: 'minutes',
      /** All lost at this share of the least minutes, or so many % points of moisture outside the range. */
      allLostMinutesTimes: 0.5,
      allLostMoisturePercent: 5,
      points: 10,
    },
  },
  termOrder: ['dose', 'inBand', 'shape', 'stageLengths', 'spread', 'preheatAndBend'],
  /** The first that holds is the verdict. Points never overrule it. */
  verdictOrder: ['incomplete', 'limit broken', 'out of tolerance', 'cannot tell', 'in tolerance'],
} as const

export type Ruleset = typeof ruleset1
