import * as z from 'zod'

/**
 * What the room keeps beside the curve, as the site words and limits it: a part of the versioned settings. Nothing of
 * it enters a score. A version of the settings from before it is read with the defaults.
 */

const finite = z.number('Write a number.')

/** A list of the site's own words: each once, letter case aside. */
function wordList(what: string) {
  return z
    .array(
      z
        .string()
        .trim()
        .min(1, `Leave no empty line among the words for ${what}.`)
        .max(40, 'At most 40 letters a word.'),
    )
    .min(1, `Write at least one word for ${what}.`)
    .max(24, `At most 24 words for ${what}.`)
    .refine((words) => new Set(words.map((word) => word.toLowerCase())).size === words.length, {
      error: `Each word for ${what} once.`,
    })
}

export const limitKinds = ['8-hour mean', 'ceiling'] as const

export const carbonMonoxideLimitSchema = z.strictObject({
  name: z
    .string('Name the limit.')
    .trim()
    .min(1, 'Name the limit, such as NIOSH.')
    .max(40, 'At most 40 letters.'),
  kind: z.enum(limitKinds, 'Choose 8-hour mean or ceiling.'),
  ppm: finite.positive('Above 0 ppm.').max(5_000, 'At most 5,000 ppm.'),
  source: z
    .string('Say where the limit stands.')
    .trim()
    .min(1, 'Say where the limit stands, such as a paragraph of local code.')
    .max(160, 'At most 160 letters.'),
})
export type CarbonMonoxideLimit = z.infer<typeof carbonMonoxideLimitSchema>

export const roomSettingsSchema = z.strictObject({
  words: z.strictObject({ colour: wordList('colour'), smell: wordList('smell') }),
  conditions: z.strictObject({
    /** A reading is a firing's own when it is of the same day and no further from its toast start than this, h. */
    nearestWithinH: finite.min(0.25, 'From a quarter of an hour.').max(24, 'Up to 24 h.'),
  }),
  exposure: z.strictObject({
    carbonMonoxideLimits: z
      .array(carbonMonoxideLimitSchema)
      .min(1, 'Keep at least one limit.')
      .max(8, 'At most 8 limits.'),
    /** Metabolic rate of the work that the heat limits are taken at, W; and where the limits stand. */
    metabolicRateW: finite.min(100, 'From 100 W.').max(700, 'Up to 700 W.'),
    heatSource: z.string().trim().min(1, 'Say where the heat limits stand.').max(160, 'At most 160 letters.'),
    /** A reading stands until the next one, and no longer than this, min. */
    readingHoldsMin: finite.min(1, 'From 1 min.').max(480, 'Up to 480 min.'),
  }),
})
export type RoomSettings = z.infer<typeof roomSettingsSchema>

/** Words: common practice. Limits: the sources named; work at a fire with a stir and a feed is taken as moderate. */
export const defaultRoomSettings: RoomSettings = {
  words: {
    colour: ['straw', 'gold', 'hazel', 'chestnut', 'dark brown', 'black at the edge'],
    smell: ['bread', 'almond', 'vanilla', 'coffee', 'smoke', 'burnt'],
  },
  conditions: { nearestWithinH: 4 },
  exposure: {
    carbonMonoxideLimits: [
      { name: 'NIOSH', kind: '8-hour mean', ppm: 35, source: 'NIOSH Pocket Guide to Chemical Hazards' },
      { name: 'OSHA', kind: '8-hour mean', ppm: 50, source: '29 CFR 1910.1000 Table Z-1' },
      { name: 'NIOSH', kind: 'ceiling', ppm: 200, source: 'NIOSH Pocket Guide to Chemical Hazards' },
    ],
    metabolicRateW: 300,
    heatSource: 'NIOSH 2016-106',
    readingHoldsMin: 60,
  },
}

/** The part as a version keeps it; an empty one is of before it was there. @throws ZodError for any other that does not fit */
export function readStoredRoom(stored: unknown): RoomSettings {
  const isEmpty = typeof stored === 'object' && stored !== null && Object.keys(stored).length === 0
  return isEmpty ? defaultRoomSettings : roomSettingsSchema.parse(stored)
}
