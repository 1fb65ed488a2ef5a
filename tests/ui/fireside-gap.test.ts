import { describe, expect, it } from 'vitest'
import { toPairReadings } from '@/components/live/fireside-pair-data'
import { createPointFeed } from '@/components/live/point-feed'

describe('the live curve', () => {
  it('breaks over a silence instead of drawing a line through it', () => {
    const feed = createPointFeed()
    for (const [atMs, tempC] of [
      [10_000, 100],
      [11_000, 101],
      [60_000, 140],
      [61_000, 141],
    ] as const) {
      feed.put(atMs, tempC)
    }
    expect(toPairReadings(feed, 0, 10_000, 'lead')).toEqual([
      { timeS: 0, leadC: 100 },
      { timeS: 1, leadC: 101 },
      { timeS: 1.001, leadC: null },
      { timeS: 50, leadC: 140 },
      { timeS: 51, leadC: 141 },
    ])
  })

  it('says no reading where the probe had none', () => {
    const feed = createPointFeed()
    feed.put(1_000, 90)
    feed.put(1_200, Number.NaN)
    expect(toPairReadings(feed, 0, 0, 'opposite').at(-1)).toEqual({ timeS: 1.2, secondC: null })
  })
})
