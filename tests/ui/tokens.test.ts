import { readFileSync } from 'node:fs'
import { wcagContrast } from 'culori'
import { describe, expect, test } from 'vitest'

/** The colours as the stylesheet has them, so that a change there is held to the same contrast. */
const css = readFileSync('app/globals.css', 'utf8')

function readBlock(selector: RegExp): Record<string, string> {
  const block = selector.exec(css)?.[1] ?? ''
  return Object.fromEntries(
    [...block.matchAll(/--([\w-]+):\s*([^;]+);/g)].map((match) => [match[1] ?? '', match[2] ?? '']),
  )
}

const base = readBlock(/:root \{([^}]*)\}/)
const grounds = {
  desk: readBlock(/:root,\s*\[data-ground='desk'\] \{([^}]*)\}/),
  fireside: readBlock(/\[data-ground='fireside'\] \{([^}]*)\}/),
}

function colour(ground: keyof typeof grounds, name: string): string {
  const value = grounds[ground][name] ?? ''
  const reference = /^var\(--([\w-]+)\)$/.exec(value)?.[1]
  return reference === undefined ? value : (base[reference] ?? '')
}

describe('contrast (WCAG 2.2 relative luminance)', () => {
  test.each(['text', 'soft', 'mute', 'water', 'amber', 'red'])(
    'desk %s reads at 4.5:1 or more on the ground and on the chosen row',
    (name) => {
      expect(wcagContrast(colour('desk', name), colour('desk', 'ground'))).toBeGreaterThanOrEqual(4.5)
      expect(wcagContrast(colour('desk', name), colour('desk', 'raised'))).toBeGreaterThanOrEqual(4.5)
    },
  )

  test.each(['text', 'soft', 'mute', 'water', 'amber', 'red'])(
    'fireside %s reads at 7:1 or more on the ground',
    (name) => {
      expect(wcagContrast(colour('fireside', name), colour('fireside', 'ground'))).toBeGreaterThanOrEqual(7)
    },
  )

  test.each(['text', 'soft', 'water', 'amber'])('fireside %s reads at 7:1 or more on raised iron', (name) => {
    expect(wcagContrast(colour('fireside', name), colour('fireside', 'raised'))).toBeGreaterThanOrEqual(7)
  })

  test.each(['desk', 'fireside'] as const)('words on water read on %s', (ground) => {
    const least = ground === 'desk' ? 4.5 : 7
    expect(wcagContrast(colour(ground, 'on-water'), colour(ground, 'water'))).toBeGreaterThanOrEqual(least)
  })

  test('dark words read on both alarm grounds', () => {
    for (const alarm of [colour('fireside', 'amber'), colour('fireside', 'red')]) {
      expect(wcagContrast(base['iron-900'] ?? '', alarm)).toBeGreaterThanOrEqual(7)
    }
  })

  test.each(['desk', 'fireside'] as const)(
    'the edge of a control stands off the %s at 3:1 or more',
    (ground) => {
      expect(wcagContrast(colour(ground, 'edge'), colour(ground, 'ground'))).toBeGreaterThanOrEqual(3)
      expect(wcagContrast(colour(ground, 'water'), colour(ground, 'ground'))).toBeGreaterThanOrEqual(3)
    },
  )
})

test('nothing at the fireside is set under 17 px', () => {
  const sizes = Object.entries(grounds.fireside).filter(([name]) =>
    /^text-(small|base|large|title)$/.test(name),
  )
  expect(sizes).toHaveLength(4)
  for (const [, size] of sizes) expect(Number.parseFloat(size)).toBeGreaterThanOrEqual(17)
})

test('motion is taken away from those who ask for none', () => {
  expect(css).toMatch(/prefers-reduced-motion: reduce[^}]*\{[^}]*transition-duration: 0\.01ms/s)
})
