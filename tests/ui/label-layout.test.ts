import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { fitWords, placeMarks, spreadLabels } from '@/components/chart/label-layout'

const measure = (words: string) => words.length * 7
const RUNS = { seed: 1_280, numRuns: 500 }

describe('names at the lines’ ends', () => {
  const labels = fc.array(
    fc.record({
      centre: fc.double({ min: -50, max: 450, noNaN: true }),
      size: fc.integer({ min: 10, max: 30 }),
    }),
    { maxLength: 8 },
  )

  test('no two cover each other, and all stay inside where they fit', () => {
    fc.assert(
      fc.property(labels, (given) => {
        const centres = spreadLabels(given, 2, 0, 400)
        const edges = given
          .map((label, i) => ({
            top: (centres[i] ?? 0) - label.size / 2,
            bottom: (centres[i] ?? 0) + label.size / 2,
          }))
          .sort((a, b) => a.top - b.top)
        edges.forEach((edge, i) => {
          expect(edge.top).toBeGreaterThanOrEqual(-1e-6)
          expect(edge.bottom).toBeLessThanOrEqual(400 + 1e-6)
          if (i > 0) expect(edge.top - (edges[i - 1]?.bottom ?? 0)).toBeGreaterThanOrEqual(2 - 1e-6)
        })
      }),
      RUNS,
    )
  })

  test('what is apart already stays where it is', () => {
    expect(
      spreadLabels(
        [
          { centre: 20, size: 10 },
          { centre: 200, size: 10 },
        ],
        2,
        0,
        400,
      ),
    ).toEqual([20, 200])
  })

  test('two at one place part by the same way each', () => {
    expect(
      spreadLabels(
        [
          { centre: 100, size: 10 },
          { centre: 100, size: 10 },
        ],
        0,
        0,
        400,
      ),
    ).toEqual([95, 105])
  })

  test('order by place is kept', () => {
    const [upper, lower] = spreadLabels(
      [
        { centre: 101, size: 20 },
        { centre: 99, size: 20 },
      ],
      0,
      0,
      400,
    )
    expect(upper).toBeGreaterThan(lower ?? Infinity)
  })
})

describe('words of the marks on the seam', () => {
  const marks = fc.array(
    fc.record({
      x: fc.double({ min: 0, max: 800, noNaN: true }),
      words: fc.constantFrom('feed', 'stir', 'lid off', 'turned over', 'no reading'),
    }),
    { minLength: 1, maxLength: 60 },
  )

  test('no two cover each other, every hairline has its words, none leaves the picture', () => {
    fc.assert(
      fc.property(marks, fc.integer({ min: 1, max: 3 }), (given, rows) => {
        const placed = placeMarks(given, measure, { left: 0, right: 800, gap: 8, rows, togetherPx: 3 })
        for (const label of placed) {
          expect(label.width).toBe(measure(label.words))
          expect(label.left).toBeGreaterThanOrEqual(0)
          expect(label.row).toBeLessThan(rows)
          for (const other of placed) {
            if (other === label || other.row !== label.row) continue
            expect(other.left + other.width <= label.left || label.left + label.width <= other.left).toBe(
              true,
            )
          }
        }
        expect(placed.flatMap((label) => label.xs).sort((a, b) => a - b)).toEqual(
          given.map((mark) => mark.x).sort((a, b) => a - b),
        )
      }),
      RUNS,
    )
  })

  test('marks of one moment share one label', () => {
    const placed = placeMarks(
      [
        { x: 300, words: 'lid on' },
        { x: 301, words: 'turned over' },
      ],
      measure,
      { left: 0, right: 800, gap: 8, rows: 1, togetherPx: 3 },
    )
    expect(placed.map((label) => label.words)).toEqual(['lid on, turned over'])
  })

  test('near ones take the next row, and what fits no row is counted', () => {
    const near = [
      { x: 100, words: 'feed' },
      { x: 110, words: 'stir' },
      { x: 120, words: 'mist' },
    ]
    const space = { left: 0, right: 800, gap: 8, togetherPx: 3 }
    expect(placeMarks(near, measure, { ...space, rows: 3 }).map((label) => label.row)).toEqual([0, 1, 2])
    expect(placeMarks(near, measure, { ...space, rows: 1 }).map((label) => label.words)).toEqual(['3 marks'])
  })
})

test('words too long are cut with an ellipsis, or left out when nothing would be left', () => {
  expect(fitWords('Deepen', 100, measure)).toBe('Deepen')
  expect(fitWords('Deepen', 35, measure)).toBe('Deep…')
  expect(fitWords('Deepen', 14, measure)).toBe('')
})
