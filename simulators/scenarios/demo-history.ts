import type { HearthOptions } from '@/simulators/hearth/hearth'

/** A batch of the past: which recipe, how many, from how many days ago on, and what went wrong. Invented. */
export type DemoBatch = {
  recipe: number
  customer: number
  count: number
  /** Pieces that were fired; the rest wait in the queue. */
  fired: number
  daysAgo: number
  woodLot: string
  moisturePercent: number
  trouble?: {
    at: number
    engine?: Partial<HearthOptions>
    gap?: { fromToastS: number; forS: number }
    abandonReason?: string
  }[]
}

const slowFire = { fuelQuality: 0.82 }

export const demoBatches: DemoBatch[] = [
  {
    recipe: 0,
    customer: 0,
    count: 12,
    fired: 12,
    daysAgo: 182,
    woodLot: 'Norlund 21-11',
    moisturePercent: 19,
  },
  {
    recipe: 1,
    customer: 1,
    count: 10,
    fired: 10,
    daysAgo: 171,
    woodLot: 'Norlund 21-11',
    moisturePercent: 18,
    trouble: [{ at: 4, gap: { fromToastS: 900, forS: 22 } }],
  },
  { recipe: 2, customer: 2, count: 8, fired: 8, daysAgo: 160, woodLot: 'Estavar 22-02', moisturePercent: 20 },
  {
    recipe: 0,
    customer: 0,
    count: 12,
    fired: 12,
    daysAgo: 146,
    woodLot: 'Estavar 22-02',
    moisturePercent: 19,
    trouble: [
      { at: 3, engine: slowFire },
      { at: 4, engine: slowFire },
      { at: 5, engine: slowFire },
    ],
  },
  { recipe: 3, customer: 0, count: 6, fired: 6, daysAgo: 132, woodLot: 'Estavar 22-02', moisturePercent: 20 },
  {
    recipe: 4,
    customer: 1,
    count: 8,
    fired: 8,
    daysAgo: 122,
    woodLot: 'Norlund 22-04',
    moisturePercent: 18,
    trouble: [{ at: 5, abandonReason: 'A truss hoop slipped. The rose was taken off (demo).' }],
  },
  { recipe: 5, customer: 2, count: 8, fired: 8, daysAgo: 112, woodLot: 'Norlund 22-04', moisturePercent: 19 },
  {
    recipe: 0,
    customer: 0,
    count: 14,
    fired: 14,
    daysAgo: 98,
    woodLot: 'Norlund 22-07',
    moisturePercent: 19,
    // The lead probe of one hearth drifts until its next check.
    trouble: [2, 5, 8, 11].map((at, index) => ({
      at,
      engine: { leadOffsetC: 1.5 + index * 1.5, driftCPerHour: 0.6 },
    })),
  },
  { recipe: 6, customer: 1, count: 8, fired: 8, daysAgo: 86, woodLot: 'Norlund 22-07', moisturePercent: 20 },
  {
    recipe: 1,
    customer: 1,
    count: 10,
    fired: 10,
    daysAgo: 76,
    woodLot: 'Estavar 22-09',
    moisturePercent: 18,
    trouble: [{ at: 6, gap: { fromToastS: 1100, forS: 110 } }],
  },
  // A damp lot: above the moisture band, slow through 100 °C.
  { recipe: 2, customer: 2, count: 8, fired: 8, daysAgo: 64, woodLot: 'Harlow 22-10', moisturePercent: 27 },
  {
    recipe: 0,
    customer: 0,
    count: 14,
    fired: 14,
    daysAgo: 50,
    woodLot: 'Norlund 22-07',
    moisturePercent: 19,
    // A cut network and a gateway without power: too long to be joined.
    trouble: [{ at: 7, gap: { fromToastS: 1000, forS: 330 } }],
  },
  { recipe: 3, customer: 0, count: 4, fired: 4, daysAgo: 28, woodLot: 'Estavar 22-09', moisturePercent: 19 },
  { recipe: 0, customer: 0, count: 14, fired: 6, daysAgo: 9, woodLot: 'Norlund 22-07', moisturePercent: 19 },
  { recipe: 1, customer: 1, count: 6, fired: 0, daysAgo: 2, woodLot: 'Estavar 22-09', moisturePercent: 18 },
]
