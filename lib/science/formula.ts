import { checkUnits } from './formula-check'
import type { FunctionName, FormulaSymbol } from './formula-symbols'
import { formulaSymbols } from './formula-symbols'
import type { FormulaFault } from './formula-text'
import type { FormulaNode } from './formula-tree'
import { printFormula, readFormulaTree, shapeOf } from './formula-tree'
import type { AssayUnit, Quantity } from './formula-units'
import { assayQuantity, assayScale, isPure, isSameDimension, nameQuantity } from './formula-units'

export type { FormulaFault } from './formula-text'

/**
 * Marker formulas: what a chemist writes for a marker's response to a toast. A formula is one expression over a closed
 * list of symbols and functions, its units are checked, and it is compiled once and evaluated on the server. It has no
 * data behind it, and so no interval.
 */

/** What is known of one toast; a symbol that is missing or null makes the formula have no value. */
export type FormulaFacts = {
  /** By name, each in its own unit: min, mm, %, and lot assays in the base unit (`inBaseUnit`). */
  symbols: ReadonlyMap<string, number | null>
  stages: readonly { minutes: number; targetTempC: number }[]
}

export type FormulaValue =
  { isKnown: true; value: number } | { isKnown: false; reason: string; index: number; length: number }

export type CompiledFormula = {
  ok: true
  /** The formula in its plain form, by `printFormula`. */
  text: string
  /** The unit that values come in. */
  unit: AssayUnit
  /** It gives a number without a unit, which is read as one of `unit`. */
  isPureNumber: boolean
  /** Names that it uses, each once, in order. */
  symbols: string[]
  evaluate: (facts: FormulaFacts) => FormulaValue
}

export type FormulaOptions = {
  /** The unit of the result: the marker's, or the one that the formula is declared in. */
  unit: AssayUnit
  /** Symbols of lot assays, beside the ones that every formula has. */
  lotSymbols?: readonly FormulaSymbol[]
}

/**
 * Reads and checks a formula. The result must be in the declared unit's dimension, or a pure number, which is read as
 * one of that unit. A fault has a sentence and its place, 0-based. Never throws for a text; the work is bounded by
 * `formulaLimits`.
 */
export function compileFormula(
  source: string,
  options: FormulaOptions,
): CompiledFormula | { ok: false; fault: FormulaFault } {
  const known = new Map<string, FormulaSymbol>(
    [...formulaSymbols, ...(options.lotSymbols ?? [])].map((one) => [one.name, one]),
  )
  const tree = readFormulaTree(source, (name) => known.has(name))
  if (!tree.ok) return tree
  const checked = checkUnits(tree.root, (name) => known.get(name)?.quantity)
  if (!checked.ok) return checked
  const fault = faultOfResult(checked.quantity, options.unit, source)
  if (fault !== null) return { ok: false, fault }
  const isPureNumber = isPure(checked.quantity)
  const scale = isPureNumber ? 1 : 1 / assayScale(options.unit)
  const root = tree.root
  return {
    ok: true,
    text: printFormula(shapeOf(root)),
    unit: options.unit,
    isPureNumber,
    symbols: [...new Set(namesIn(root))],
    evaluate: (facts) => evaluateRoot(root, facts, known, scale),
  }
}

function faultOfResult(quantity: Quantity, unit: AssayUnit, source: string): FormulaFault | null {
  if (isPure(quantity)) return null
  if (!quantity.isPoint && isSameDimension(quantity, assayQuantity(unit))) return null
  return {
    message: `This gives ${nameQuantity(quantity)}, not ${unit}. Divide by its unit, as in dose / minute, and a number is read as ${unit}.`,
    index: 0,
    length: Math.max(1, source.length),
  }
}

function namesIn(node: FormulaNode): string[] {
  switch (node.kind) {
    case 'number':
      return []
    case 'symbol':
      return [node.name]
    case 'negative':
      return namesIn(node.of)
    case 'operator':
      return [...namesIn(node.left), ...namesIn(node.right)]
    case 'call':
      return node.args.flatMap(namesIn)
  }
}

/** Why a formula has no value for these facts, and where. */
class NoValue extends Error {
  constructor(
    message: string,
    readonly at: FormulaNode,
  ) {
    super(message)
  }
}

function evaluateRoot(
  root: FormulaNode,
  facts: FormulaFacts,
  known: ReadonlyMap<string, FormulaSymbol>,
  scale: number,
): FormulaValue {
  try {
    return { isKnown: true, value: evaluateNode(root, facts, known) * scale }
  } catch (error) {
    if (!(error instanceof NoValue)) throw error
    return { isKnown: false, reason: error.message, index: error.at.index, length: error.at.length }
  }
}

function evaluateNode(
  node: FormulaNode,
  facts: FormulaFacts,
  known: ReadonlyMap<string, FormulaSymbol>,
): number {
  const value = rawValue(node, facts, known)
  if (!Number.isFinite(value)) throw new NoValue('This part has no number here.', node)
  return value
}

function rawValue(node: FormulaNode, facts: FormulaFacts, known: ReadonlyMap<string, FormulaSymbol>): number {
  switch (node.kind) {
    case 'number':
      return node.value
    case 'symbol':
      return symbolValue(node, facts, known)
    case 'negative':
      return -evaluateNode(node.of, facts, known)
    case 'operator': {
      const left = evaluateNode(node.left, facts, known)
      const right = evaluateNode(node.right, facts, known)
      return operations[node.sign](left, right)
    }
    case 'call':
      return callValue(
        node,
        node.args.map((arg) => evaluateNode(arg, facts, known)),
        facts,
      )
  }
}

const operations: Record<
  Extract<FormulaNode, { kind: 'operator' }>['sign'],
  (a: number, b: number) => number
> = {
  '+': (a, b) => a + b,
  '-': (a, b) => a - b,
  '*': (a, b) => a * b,
  '/': (a, b) => a / b,
  '^': (a, b) => a ** b,
}

function symbolValue(
  node: Extract<FormulaNode, { kind: 'symbol' }>,
  facts: FormulaFacts,
  known: ReadonlyMap<string, FormulaSymbol>,
): number {
  const symbol = known.get(node.name)
  const value = symbol?.constant ?? facts.symbols.get(node.name) ?? null
  if (value !== null) return value
  throw new NoValue(
    symbol?.isLotAssay === true
      ? `${symbol.meaning} is not known: give its assay.`
      : `There is no ${node.name} here.`,
    node,
  )
}

function callValue(
  node: Extract<FormulaNode, { kind: 'call' }>,
  args: readonly number[],
  facts: FormulaFacts,
): number {
  const first = args[0] ?? Number.NaN
  if (node.name === 'stage_minutes' || node.name === 'stage_target') {
    const stage = facts.stages[first - 1]
    if (stage === undefined) {
      throw new NoValue(`There is no stage ${first}: the fire has ${facts.stages.length}.`, node)
    }
    return node.name === 'stage_minutes' ? stage.minutes : stage.targetTempC
  }
  return numericFunctions[node.name](args)
}

const numericFunctions: Record<
  Exclude<FunctionName, 'stage_minutes' | 'stage_target'>,
  (args: readonly number[]) => number
> = {
  exp: ([a = Number.NaN]) => Math.exp(a),
  ln: ([a = Number.NaN]) => Math.log(a),
  log10: ([a = Number.NaN]) => Math.log10(a),
  sqrt: ([a = Number.NaN]) => Math.sqrt(a),
  abs: ([a = Number.NaN]) => Math.abs(a),
  min: (args) => Math.min(...args),
  max: (args) => Math.max(...args),
  celsius: ([a = Number.NaN]) => a,
}
