import type { FunctionName } from './formula-symbols'
import { mostStages } from './formula-symbols'
import type { FormulaFault } from './formula-text'
import type { FormulaNode } from './formula-tree'
import type { Quantity } from './formula-units'
import {
  isPure,
  isSameDimension,
  multiplyQuantities,
  nameQuantity,
  powerOfQuantity,
  pureNumber,
  quantityOf,
} from './formula-units'

/**
 * Unit checking of a formula: what it is a quantity of, or the first place where units do not agree. Sums and smallest
 * or largest values need one unit, logarithms and exponentials a pure number, a power of a quantity a plain number as
 * its exponent. Temperatures on the Celsius scale may be subtracted and compared only.
 */

export type QuantityOf = (symbol: string) => Quantity | undefined
export type Checked = { ok: true; quantity: Quantity } | { ok: false; fault: FormulaFault }

function fine(quantity: Quantity): Checked {
  return { ok: true, quantity }
}

function wrong(message: string, at: FormulaNode): Checked {
  return { ok: false, fault: { message, index: at.index, length: at.length } }
}

const noRatio =
  'A temperature in °C has its zero where ice melts, so it cannot be multiplied. Subtract another one first: stage_target(1) - celsius(200).'

export function checkUnits(node: FormulaNode, quantityOfSymbol: QuantityOf): Checked {
  switch (node.kind) {
    case 'number':
      return fine(pureNumber)
    case 'symbol': {
      const quantity = quantityOfSymbol(node.name)
      return quantity === undefined ? wrong(`There is no quantity ${node.name}.`, node) : fine(quantity)
    }
    case 'negative': {
      const of = checkUnits(node.of, quantityOfSymbol)
      return of.ok && of.quantity.isPoint ? wrong(noRatio, node.of) : of
    }
    case 'call':
      return checkCall(node, quantityOfSymbol)
    case 'operator': {
      const left = checkUnits(node.left, quantityOfSymbol)
      if (!left.ok) return left
      const right = checkUnits(node.right, quantityOfSymbol)
      if (!right.ok) return right
      if (node.sign === '^') return checkPower(node.left, left.quantity, node.right, right.quantity)
      if (node.sign === '+' || node.sign === '-') {
        return checkSum(node, node.sign, left.quantity, right.quantity)
      }
      if (left.quantity.isPoint) return wrong(noRatio, node.left)
      if (right.quantity.isPoint) return wrong(noRatio, node.right)
      return fine(multiplyQuantities(left.quantity, right.quantity, node.sign === '*' ? 1 : -1))
    }
  }
}

function checkSum(at: FormulaNode, sign: '+' | '-', left: Quantity, right: Quantity): Checked {
  if (!isSameDimension(left, right)) {
    const verb = sign === '+' ? 'added to' : 'subtracted from'
    return wrong(`Units do not agree: ${nameQuantity(right)} cannot be ${verb} ${nameQuantity(left)}.`, at)
  }
  if (left.isPoint && right.isPoint) {
    return sign === '-' ? fine({ ...left, isPoint: false }) : wrong('Two temperatures in °C have no sum.', at)
  }
  if (right.isPoint && sign === '-') {
    return wrong('A temperature cannot be subtracted from a difference.', at)
  }
  return fine({ ...left, isPoint: left.isPoint || right.isPoint })
}

/** The number that a plain exponent stands for, "2" or "-0.5"; null for anything computed. */
function plainNumber(node: FormulaNode): number | null {
  if (node.kind === 'number') return node.value
  return node.kind === 'negative' && node.of.kind === 'number' ? -node.of.value : null
}

const largestExponent = 6

function checkPower(base: FormulaNode, of: Quantity, exponent: FormulaNode, by: Quantity): Checked {
  if (!isPure(by)) return wrong(`An exponent is a pure number, not ${nameQuantity(by)}.`, exponent)
  if (isPure(of)) return fine(pureNumber)
  if (of.isPoint) return wrong(noRatio, base)
  const power = plainNumber(exponent)
  if (power === null || Math.abs(power) > largestExponent) {
    return wrong(
      `A quantity with a unit takes a plain exponent of at most ${largestExponent}. Divide by the unit first: dose / minute.`,
      exponent,
    )
  }
  return fine(powerOfQuantity(of, power))
}

type Call = Extract<FormulaNode, { kind: 'call' }>

function checkCall(node: Call, quantityOfSymbol: QuantityOf): Checked {
  const quantities: Quantity[] = []
  for (const arg of node.args) {
    const checked = checkUnits(arg, quantityOfSymbol)
    if (!checked.ok) return checked
    quantities.push(checked.quantity)
  }
  const [arg] = node.args
  const [first] = quantities
  if (arg === undefined || first === undefined) return wrong(`${node.name} needs a value.`, node)
  return callRules[node.name](node, arg, first, quantities)
}

type CallRule = (node: Call, arg: FormulaNode, first: Quantity, all: readonly Quantity[]) => Checked

const ofPureNumber: CallRule = (node, arg, first) =>
  isPure(first)
    ? fine(pureNumber)
    : wrong(
        `${node.name} is taken of a pure number, not of ${nameQuantity(first)}. Divide by a quantity of the same unit, as in ${node.name}(dose / minute).`,
        arg,
      )

const ofStage =
  (quantity: Quantity): CallRule =>
  (node, arg) => {
    const isPlace =
      arg.kind === 'number' && Number.isInteger(arg.value) && arg.value >= 1 && arg.value <= mostStages
    return isPlace
      ? fine(quantity)
      : wrong(`Name the stage by its place, a whole number from 1 to ${mostStages}: ${node.name}(2).`, arg)
  }

const ofOneUnit: CallRule = (node, _arg, first, all) => {
  const odd = all.findIndex((one) => !isSameDimension(one, first) || one.isPoint !== first.isPoint)
  const other = all[odd]
  const at = node.args[odd]
  return other === undefined || at === undefined
    ? fine(first)
    : wrong(`Units do not agree: ${nameQuantity(other)} stands beside ${nameQuantity(first)}.`, at)
}

const callRules: Record<FunctionName, CallRule> = {
  exp: ofPureNumber,
  ln: ofPureNumber,
  log10: ofPureNumber,
  sqrt: (_node, arg, first) => (first.isPoint ? wrong(noRatio, arg) : fine(powerOfQuantity(first, 0.5))),
  abs: (_node, arg, first) => (first.isPoint ? wrong(noRatio, arg) : fine(first)),
  min: ofOneUnit,
  max: ofOneUnit,
  celsius: (_node, arg) =>
    plainNumber(arg) === null
      ? wrong('Write the temperature as a number: celsius(200).', arg)
      : fine(quantityOf('°C', true)),
  stage_minutes: ofStage(quantityOf('min')),
  stage_target: ofStage(quantityOf('°C', true)),
}
