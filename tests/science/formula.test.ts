import fc from 'fast-check'
import { create, all } from 'mathjs/number'
import { describe, expect, it } from 'vitest'
import type { FormulaFacts } from '../../lib/science/formula'
import { compileFormula } from '../../lib/science/formula'
import type { FunctionName } from '../../lib/science/formula-symbols'
import {
  formulaFunctions,
  formulaSymbols,
  inBaseUnit,
  lotAssaySymbol,
} from '../../lib/science/formula-symbols'
import { formulaLimits } from '../../lib/science/formula-text'
import type { FormulaShape } from '../../lib/science/formula-tree'
import { printFormula, readFormulaTree, shapeOf } from '../../lib/science/formula-tree'
import { expectWithin, propertyRun } from './published-checks'

const facts: FormulaFacts = {
  symbols: new Map([
    ['dose', 13.8],
    ['log10_dose', Math.log10(13.8)],
    ['slow_index', 21],
    ['fast_index', 6.2],
    ['toast_depth', 8.9],
    ['preheat_moisture', 20],
    ['fire_minutes', 45],
    ['stage_count', 3],
  ]),
  stages: [
    { minutes: 12, targetTempC: 150 },
    { minutes: 8, targetTempC: 186 },
    { minutes: 25, targetTempC: 186 },
  ],
}
const lotSymbols = [lotAssaySymbol({ key: 'vanillin', name: 'Vanillin', unit: 'ng/g' })]

function compile(text: string, unit: 'µg/g' | 'mg/g' | 'µg/L' = 'µg/g') {
  return compileFormula(text, { unit, lotSymbols })
}

function valueOf(text: string, unit: 'µg/g' | 'mg/g' | 'µg/L' = 'µg/g', given = facts): number {
  const compiled = compile(text, unit)
  if (!compiled.ok) throw new Error(`${text}: ${compiled.fault.message}`)
  const value = compiled.evaluate(given)
  if (!value.isKnown) throw new Error(`${text}: ${value.reason}`)
  return value.value
}

function faultOf(text: string) {
  const compiled = compile(text)
  if (compiled.ok) throw new Error(`${text} was taken as ${compiled.text}`)
  return compiled.fault
}

/** The part of the text that a fault points at. */
function pointedAt(text: string): string {
  const { index, length } = faultOf(text)
  return text.slice(index, index + length)
}

describe('a formula computes', () => {
  it('what its symbols, stages and functions say (by hand)', () => {
    expectWithin(valueOf('2.5 + 1.75 * log10_dose'), 2.5 + 1.75 * Math.log10(13.8), 1e-12)
    expectWithin(valueOf('3 * exp(-stage_minutes(3) / (20 * minute))'), 3 * Math.exp(-25 / 20), 1e-12)
    expectWithin(valueOf('(stage_target(2) - celsius(150)) / (3 * degree)'), 12, 1e-12)
    expectWithin(valueOf('max(toast_depth, 2 * mm) / mm + preheat_moisture / percent'), 28.9, 1e-12)
    expectWithin(valueOf('sqrt(slow_index * slow_index) / minute + stage_count'), 24, 1e-12)
    expect(valueOf('-2 ^ 2')).toBe(-4)
    expect(valueOf('2 ^ 3 ^ 2')).toBe(512)
    expect(valueOf('12 / 3 / 2')).toBe(2)
    expect(valueOf('7 − 2 × 3 ÷ 6')).toBe(6)
  })

  it('in the declared unit: a pure number is read as one of it, a quantity is converted', () => {
    expect(valueOf('2', 'mg/g')).toBe(2)
    expect(valueOf('2000 * ug_per_g', 'mg/g')).toBe(2)
    expect(valueOf('ug_per_l * 3', 'µg/L')).toBe(3)
    const withLot = {
      ...facts,
      symbols: new Map([...facts.symbols, ['lot_vanillin', inBaseUnit(500, 'ng/g')]]),
    }
    expectWithin(valueOf('lot_vanillin * 4', 'µg/g', withLot), 2, 1e-12)
  })

  it('nothing where a fact is missing or there is no number, and says which and where', () => {
    const cases: [string, string, string][] = [
      [
        '1 + lot_vanillin / ug_per_g',
        'Vanillin of the wood lot before the fire is not known: give its assay.',
        'lot_vanillin',
      ],
      ['2 * stage_minutes(4) / minute', 'There is no stage 4: the fire has 3.', 'stage_minutes(4'],
      ['3 + 1 / (stage_count - 3)', 'This part has no number here.', '1 / (stage_count - 3'],
      ['ln(stage_count - 4)', 'This part has no number here.', 'ln(stage_count - 4'],
      ['exp(10 ^ 6)', 'This part has no number here.', 'exp(10 ^ 6'],
    ]
    for (const [text, reason, part] of cases) {
      const compiled = compile(text)
      if (!compiled.ok) throw new Error(compiled.fault.message)
      const value = compiled.evaluate(facts)
      if (value.isKnown) throw new Error(`${text} has the value ${value.value}`)
      expect(value.reason).toBe(reason)
      expect(text.slice(value.index, value.index + value.length)).toBe(part)
    }
    const none = compile('log10_dose')
    if (!none.ok) throw new Error('log10_dose')
    expect(none.evaluate({ ...facts, symbols: new Map([['log10_dose', null]]) }).isKnown).toBe(false)
  })

  it('every symbol and function of the list, which are what they are called', () => {
    const names = [...formulaSymbols.map((one) => one.name), ...formulaFunctions.map((one) => one.name)]
    expect(new Set(names).size).toBe(names.length)
    for (const { name, quantity, unit } of formulaSymbols) {
      const isOwn = unit === 'µg/g' || quantity.exponents.every((one) => one === 0)
      expect(valueOf(isOwn ? name : `${name} / ${name}`)).toBeGreaterThan(0)
    }
    const calls: Record<string, number> = {
      'exp(0)': 1,
      'ln(1)': 0,
      'log10(1000)': 3,
      'sqrt(9)': 3,
      'abs(-4)': 4,
      'min(2, 1)': 1,
      'max(2, 3)': 3,
      '(celsius(200) - celsius(150)) / degree': 50,
      'stage_minutes(1) / minute': 12,
      '(stage_target(2) - celsius(0)) / degree': 186,
    }
    for (const [text, value] of Object.entries(calls)) expectWithin(valueOf(text), value, 1e-12)
    for (const { name } of formulaFunctions) {
      expect(
        Object.keys(calls).some((text) => text.includes(`${name}(`)),
        name,
      ).toBe(true)
    }
  })
})

describe('units are checked', () => {
  const refused: [text: string, sentence: string, at: string][] = [
    ['dose + stage_target(1)', 'a temperature in °C cannot be added to min', 'dose + stage_target(1'],
    ['1 + dose', 'min cannot be added to a pure number', '1 + dose'],
    ['toast_depth - dose', 'min cannot be subtracted from mm', 'toast_depth - dose'],
    ['ln(dose)', 'ln is taken of a pure number, not of min', 'dose'],
    ['log10(toast_depth)', 'not of mm', 'toast_depth'],
    ['exp(stage_target(2))', 'not of a temperature in °C', 'stage_target(2'],
    ['2 ^ dose', 'An exponent is a pure number, not min', 'dose'],
    ['(dose * dose) ^ log10_dose / minute', 'plain exponent', 'log10_dose'],
    ['dose ^ 9', 'plain exponent', '9'],
    ['stage_target(2) * 2', 'cannot be multiplied', 'stage_target(2'],
    ['-stage_target(2)', 'cannot be multiplied', 'stage_target(2'],
    ['sqrt(celsius(200))', 'cannot be multiplied', 'celsius(200'],
    ['stage_target(1) + stage_target(2)', 'have no sum', 'stage_target(1) + stage_target(2'],
    ['degree - celsius(3)', 'cannot be subtracted from a difference', 'degree - celsius(3'],
    ['min(1, dose)', 'min stands beside a pure number', 'dose'],
    ['max(degree, celsius(2))', 'a temperature in °C stands beside °C', 'celsius(2'],
    ['stage_minutes(log10_dose)', 'whole number from 1 to 24', 'log10_dose'],
    ['stage_minutes(0) / minute', 'whole number from 1 to 24', '0'],
    ['stage_target(1.5)', 'whole number from 1 to 24', '1.5'],
    ['celsius(log10_dose)', 'as a number', 'log10_dose'],
    ['dose', 'This gives min, not µg/g', 'dose'],
    ['dose * toast_depth', 'This gives min·mm, not µg/g', 'dose * toast_depth'],
    ['3 * ug_per_l', 'This gives µg/L, not µg/g', '3 * ug_per_l'],
    ['1 / minute', 'This gives 1 per min', '1 / minute'],
    ['stage_target(1)', 'This gives a temperature in °C', 'stage_target(1)'],
  ]
  it.each(refused)('%s: %s', (text, sentence, at) => {
    expect(faultOf(text).message).toContain(sentence)
    expect(pointedAt(text)).toBe(at)
  })

  it('differences, ratios, powers and roots have the unit that they should', () => {
    for (const text of [
      '(stage_target(2) - stage_target(1)) / degree',
      'ln(dose / slow_index)',
      '(dose / minute) ^ 0.5',
      'sqrt(dose / minute)',
      'dose ^ 2 / (slow_index * fast_index)',
      'abs(stage_target(1) - celsius(200)) / (stage_target(2) - celsius(10))',
      '(min(celsius(200), stage_target(1)) - celsius(1)) / degree',
    ]) {
      expect(compile(text).ok, text).toBe(true)
    }
  })
})

describe('a fault has its place and says what to do', () => {
  const faults: [text: string, sentence: string, at: string][] = [
    ['0,5 * log10_dose', 'decimal mark as a point', ','],
    ['2 * vanilin', 'There is no quantity vanilin', 'vanilin'],
    ['2 + log(3)', 'Write ln for the natural logarithm', 'log'],
    ['2 log10_dose', 'Write an operator', 'log10_dose'],
    ['2log10_dose', 'Write *', 'l'],
    ['(1 + 2', 'never closed', '('],
    ['1 + 2)', 'closes nothing', ')'],
    ['exp 2', 'in parentheses', 'exp'],
    ['dose(2)', 'no function', 'dose'],
    ['exp()', 'nothing between', ')'],
    ['exp(1, 2)', 'exp takes 1 value', 'exp'],
    ['min(1)', 'min takes 2 to 6 values', 'min'],
    ['1 + * 2', 'breaks off or has a sign too many', '*'],
    ['1 +', 'breaks off or has a sign too many', '+'],
    ['(1 + ) * 2', 'Something is missing before', ')'],
    ['200 °C', 'celsius(200)', '°'],
    ['20 %', 'percent', '%'],
    ['1.5.2', 'one point', '1.5.'],
    ['', 'Write a formula', ''],
  ]
  it.each(faults)('%s: %s', (text, sentence, at) => {
    expect(faultOf(text).message).toContain(sentence)
    expect(pointedAt(text)).toBe(at)
  })

  it('law: inside the text, whatever the text is', () => {
    fc.assert(
      fc.property(
        fc.oneof(fc.string({ maxLength: 60 }), fc.string({ unit: 'binary', maxLength: 60 })),
        (text) => {
          const compiled = compile(text)
          if (compiled.ok) return
          expect(compiled.fault.index).toBeGreaterThanOrEqual(0)
          expect(compiled.fault.index).toBeLessThanOrEqual(Math.max(0, text.length - 1))
          expect(compiled.fault.length).toBeGreaterThan(0)
          expect(compiled.fault.message.length).toBeGreaterThan(10)
        },
      ),
      { ...propertyRun, numRuns: 300 },
    )
  })
})

const deep = (n: number) => `${'('.repeat(n)}1${')'.repeat(n)}`

/** Ways out of a formula that an expression language may have, or ways to make it work without end. */
const hostile: string[] = [
  'import("fs")',
  'import({a: 1})',
  'createUnit("x")',
  'evaluate("1+1")',
  'parse("1")',
  'simplify("x")',
  'derivative("x^2", "x")',
  'compile("1")',
  'parser()',
  'config({})',
  'typed("a", {})',
  'chain(3)',
  'help(sin)',
  'reviver(1)',
  'unit("5 min")',
  'unit(5)',
  '5 min to s',
  'dose to hour',
  '5 cm',
  'to(dose, minute)',
  'dose in minute',
  'format(1)',
  'print("a", 1)',
  'map([1], f)',
  'forEach([1], f)',
  'filter([1], f)',
  'sort([1])',
  'f(x) = x',
  'f(x) = f(x)',
  'x = 1',
  'dose = 5',
  'dose.valueOf',
  'dose.constructor',
  'constructor',
  'constructor("return process")()',
  '__proto__',
  'exp.constructor',
  'exp.constructor("return 1")()',
  'toString',
  'toString()',
  'hasOwnProperty("a")',
  'valueOf()',
  'prototype',
  'this',
  'globalThis',
  'process',
  'process.exit()',
  'require("fs")',
  'eval("1")',
  'Function("return 1")()',
  '[1, 2, 3]',
  '[1:1000000000]',
  '1:10',
  'range(1, 1e9)',
  'zeros(1e5, 1e5)',
  'ones(9, 9)',
  'matrix()',
  'dose[1]',
  'dose["constructor"]',
  '{a: 1}',
  '{a: 1}.a',
  '{__proto__: 1}',
  '"text"',
  "'text'",
  '`text`',
  '1; 2',
  '1\n2',
  '# remark',
  'dose # remark',
  '1 ? 2 : 3',
  'dose > 1',
  'dose == dose',
  'true',
  'false',
  'null',
  'undefined',
  'NaN',
  'Infinity',
  'i',
  'e',
  'pi',
  'end',
  'ans',
  '5!',
  '100000!',
  'factorial(1e6)',
  'gamma(170)',
  '2 & 3',
  '2 | 3',
  '~2',
  '2 << 30',
  '2 mod 3',
  'not 1',
  '1 and 1',
  '1 xor 1',
  '0x10',
  '0b11',
  '1n',
  '1e400',
  '9'.repeat(400),
  '9'.repeat(5000),
  '1e-999',
  '2 ..^ 3',
  'dose .* 2',
  "dose'",
  'a => a',
  '(dose) (dose)',
  'random()',
  'random(1, 2)',
  'pickRandom([1])',
  'now()',
  'sum(1, 2)',
  'nthRoot(8, 3)',
  'bignumber(2)',
  'complex(1, 2)',
  'fraction(1, 3)',
  'version',
  'expression.docs',
  'Unit',
  'lot_unknown',
  'lot_vanillin.x',
  'stage_minutes',
  'stage_minutes(dose)',
  'stage_minutes(1e9)',
  'stage_minutes(-1)',
  'stage_minutes(stage_minutes(1))',
  'DOSE',
  'Dose',
  'dоse',
  'dose\u200b',
  '\u202edose',
  '１ + １',
  '\u0000',
  '𝟙 + 1',
  'exp\\(1)',
  '\\u0065xp(1)',
  deep(13),
  deep(100),
  deep(100_000),
  '('.repeat(300),
  ')'.repeat(300),
  '-'.repeat(300) + '1',
  '2' + '^2'.repeat(100),
  '1' + '+1'.repeat(100),
  '1' + '+1'.repeat(79) + '+exp(1)',
  'exp('.repeat(20) + '1' + ')'.repeat(20),
  'min(1, 2, 3, 4, 5, 6, 7)',
  `min(${'1, '.repeat(70)}1)`,
  ','.repeat(100),
  '^'.repeat(100),
  '+'.repeat(170),
]

describe('a formula reaches nothing outside its list', () => {
  it('is tried with at least 60 hostile ones, each another', () => {
    expect(new Set(hostile).size).toBe(hostile.length)
    expect(hostile.length).toBeGreaterThanOrEqual(60)
  })

  it.each(hostile.map((text) => [text.length > 40 ? `${text.slice(0, 40)}… (${text.length})` : text, text]))(
    'refuses %s',
    (_title, text) => {
      const fault = faultOf(text)
      expect(fault.message).toMatch(/[.:)]$/)
      expect(fault.index).toBeLessThan(Math.max(1, text.length))
    },
  )

  it('refuses them all within seconds together: the work is bounded by letters, tokens, depth and parts', () => {
    const startMs = performance.now()
    for (let round = 0; round < 5; round += 1) for (const text of hostile) compile(text)
    expect((performance.now() - startMs) / 5).toBeLessThan(5000)
    expect(formulaLimits).toEqual({ letters: 400, tokens: 160, depth: 12, nodes: 120 })
  })

  it('law: names only what is on the list, for any words between any signs', () => {
    const words = fc.constantFrom(
      'dose',
      'exp',
      'constructor',
      '__proto__',
      'import',
      'evaluate',
      'parse',
      '1',
      '(',
      ')',
      '.',
      '[',
      ']',
      '=',
      '"',
      ' ',
      '+',
      '*',
      '^',
      ',',
      ':',
      'to',
      'min',
      'mod',
    )
    const allowed = new Set(formulaSymbols.map((one) => one.name))
    fc.assert(
      fc.property(fc.array(words, { maxLength: 14 }), (parts) => {
        const compiled = compile(parts.join(''))
        if (compiled.ok) for (const name of compiled.symbols) expect(allowed.has(name)).toBe(true)
      }),
      { ...propertyRun, numRuns: 1000 },
    )
  })
})

const isKnown = (name: string) => formulaSymbols.some((one) => one.name === name)
const oneArgument: FunctionName[] = ['exp', 'ln', 'log10', 'sqrt', 'abs']

const shapes = fc.letrec<{ shape: FormulaShape }>((tie) => ({
  shape: fc.oneof(
    { maxDepth: 4, withCrossShrink: true },
    fc
      .oneof(fc.integer({ min: 0, max: 500 }), fc.double({ min: 1e-9, max: 1e9, noNaN: true }))
      .map((value): FormulaShape => ({ kind: 'number', value })),
    fc
      .constantFrom('log10_dose', 'stage_count', 'dose')
      .map((name): FormulaShape => ({ kind: 'symbol', name })),
    tie('shape').map((of): FormulaShape => ({ kind: 'negative', of })),
    fc
      .tuple(fc.constantFrom('+', '-', '*', '/', '^'), tie('shape'), tie('shape'))
      .map(([sign, left, right]): FormulaShape => ({ kind: 'operator', sign, left, right })),
    fc
      .tuple(fc.constantFrom(...oneArgument), tie('shape'))
      .map(([name, arg]): FormulaShape => ({ kind: 'call', name, args: [arg] })),
    fc
      .tuple(fc.constantFrom('min', 'max'), fc.array(tie('shape'), { minLength: 2, maxLength: 3 }))
      .map(([name, args]): FormulaShape => ({ kind: 'call', name, args })),
  ),
}))

describe('printing and reading a formula', () => {
  it('law: are inverse: what is printed is read as the same formula', () => {
    fc.assert(
      fc.property(shapes.shape, (shape) => {
        const text = printFormula(shape)
        const tree = readFormulaTree(text, isKnown)
        if (!tree.ok) {
          // Only the limits may stand in the way.
          expect(tree.fault.message).toMatch(/at most|too long|deep/)
          return
        }
        expect(shapeOf(tree.root)).toEqual(shape)
        expect(printFormula(shapeOf(tree.root))).toBe(text)
      }),
      { ...propertyRun, numRuns: 500 },
    )
  })

  it('law: a formula gives what mathjs itself gives for the same text, names put as numbers', () => {
    const math = create(all ?? {})
    const scope = { log10_dose: 1.14, stage_count: 3, dose: 13.8, ln: Math.log }
    let compared = 0
    fc.assert(
      fc.property(shapes.shape, (shape) => {
        const text = printFormula(shape).replaceAll(/\bdose\b/g, 'log10_dose')
        const compiled = compile(text)
        if (!compiled.ok) return
        const value = compiled.evaluate({
          symbols: new Map(
            Object.entries(scope)
              .filter(([name]) => name !== 'ln')
              .map(([name, one]) => [name, Number(one)]),
          ),
          stages: [],
        })
        const theirs: unknown = math.evaluate(text, { ...scope })
        if (!value.isKnown || typeof theirs !== 'number') return
        compared += 1
        expectWithin(value.value, theirs, 1e-12 * Math.max(1, Math.abs(theirs)))
      }),
      { ...propertyRun, numRuns: 400 },
    )
    expect(compared).toBeGreaterThan(100)
  })
})
