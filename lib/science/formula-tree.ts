import type { MathNode } from 'mathjs'
import { create, parseDependencies } from 'mathjs/number'
import type { FunctionName } from './formula-symbols'
import { functionNamed } from './formula-symbols'
import type { FormulaFault, Token } from './formula-text'
import { formulaLimits, lexFormula } from './formula-text'

/**
 * A formula as a tree of our own. mathjs reads the text, which settles precedence; its nodes are turned one by one
 * into these, everything unknown refused, and nothing of mathjs is ever evaluated. mathjs keeps no places, so each
 * number and name takes the place of its token: both stand in the same order.
 */

export type OperatorSign = '+' | '-' | '*' | '/' | '^'

export type FormulaShape =
  | { kind: 'number'; value: number }
  | { kind: 'symbol'; name: string }
  | { kind: 'negative'; of: FormulaShape }
  | { kind: 'operator'; sign: OperatorSign; left: FormulaShape; right: FormulaShape }
  | { kind: 'call'; name: FunctionName; args: FormulaShape[] }

type Placed = { index: number; length: number }

/** The same with the place of every part in the text. */
export type FormulaNode = Placed &
  (
    | { kind: 'number'; value: number }
    | { kind: 'symbol'; name: string }
    | { kind: 'negative'; of: FormulaNode }
    | { kind: 'operator'; sign: OperatorSign; left: FormulaNode; right: FormulaNode }
    | { kind: 'call'; name: FunctionName; args: FormulaNode[] }
  )

export type FormulaTree = { ok: true; root: FormulaNode } | { ok: false; fault: FormulaFault }

/** Only the parser and what it is built from: no function that a formula could call is in this instance. */
const { parse } = create(parseDependencies ?? {})

class Refusal extends Error {
  constructor(readonly fault: FormulaFault) {
    super(fault.message)
  }
}

function refuse(message: string, place: Placed): never {
  throw new Refusal({ message, index: place.index, length: Math.max(1, place.length) })
}

/**
 * Reads a formula; names are those that `isKnown` takes and the closed list of functions.
 * Never throws for a text, however it is made.
 */
export function readFormulaTree(source: string, isKnown: (symbol: string) => boolean): FormulaTree {
  const lexed = lexFormula(source, isKnown)
  if (!lexed.ok) return lexed
  try {
    return { ok: true, root: convert(parseText(lexed.text), cursorOf(lexed.tokens)) }
  } catch (error) {
    if (error instanceof Refusal) return { ok: false, fault: error.fault }
    throw error
  }
}

function parseText(text: string): MathNode {
  try {
    return parse(text)
  } catch (error) {
    const char: unknown = typeof error === 'object' && error !== null ? Reflect.get(error, 'char') : undefined
    const index = typeof char === 'number' ? Math.min(char - 1, text.length - 1) : text.trimEnd().length - 1
    return refuse('The formula breaks off or has a sign too many here.', {
      index: Math.max(0, index),
      length: 1,
    })
  }
}

type Cursor = { leaf: (text: string | null) => Token; count: () => void }

/** Hands out the tokens of numbers and names in order, and counts the nodes. */
function cursorOf(tokens: readonly Token[]): Cursor {
  const leaves = tokens.filter((token) => token.kind === 'number' || token.kind === 'name')
  let next = 0
  let nodes = 0
  return {
    leaf(text) {
      const token = leaves[next]
      next += 1
      if (token === undefined || (text !== null && token.text !== text)) {
        return refuse('This formula cannot be read: write it more plainly.', token ?? { index: 0, length: 1 })
      }
      return token
    },
    count() {
      nodes += 1
      if (nodes > formulaLimits.nodes) {
        refuse(
          `A formula has at most ${formulaLimits.nodes} parts: split it.`,
          leaves[next] ?? { index: 0, length: 1 },
        )
      }
    },
  }
}

const signOf: ReadonlyMap<string, OperatorSign> = new Map([
  ['add', '+'],
  ['subtract', '-'],
  ['multiply', '*'],
  ['divide', '/'],
  ['pow', '^'],
])

/** The parsed boundary: one mathjs node into one of ours, by its type; a type that is not named here is refused. */
function convert(node: MathNode, cursor: Cursor): FormulaNode {
  cursor.count()
  switch (node.type) {
    case 'ParenthesisNode':
      return convert(childOf(node, 'content'), cursor)
    case 'ConstantNode': {
      const { text, index, length } = cursor.leaf(null)
      return { kind: 'number', value: Number(text), index, length }
    }
    case 'SymbolNode': {
      const name = textOf(node, 'name')
      const { index, length } = cursor.leaf(name)
      return { kind: 'symbol', name, index, length }
    }
    case 'FunctionNode':
      return convertCall(node, cursor)
    case 'OperatorNode':
      return convertOperator(node, cursor)
    default:
      return refuse('This cannot be part of a formula.', cursor.leaf(null))
  }
}

function convertCall(node: MathNode, cursor: Cursor): FormulaNode {
  const name = textOf(childOf(node, 'fn'), 'name')
  const token = cursor.leaf(name)
  const known = functionNamed(name)
  if (known === undefined) return refuse(`There is no function ${name}.`, token)
  const args = childrenOf(node).map((arg) => convert(arg, cursor))
  if (args.length < known.fewest || args.length > known.most) {
    const wanted = known.fewest === known.most ? `${known.fewest}` : `${known.fewest} to ${known.most}`
    return refuse(`${name} takes ${wanted} ${known.most === 1 ? 'value' : 'values'}: ${known.form}.`, token)
  }
  const end = args.at(-1)
  const length = end === undefined ? token.length : end.index + end.length - token.index
  return { kind: 'call', name: known.name, args, index: token.index, length }
}

function convertOperator(node: MathNode, cursor: Cursor): FormulaNode {
  const operator = textOf(node, 'fn')
  const [first, second, ...more] = childrenOf(node)
  if (first === undefined || more.length > 0)
    return refuse('This cannot be part of a formula.', cursor.leaf(null))
  const left = convert(first, cursor)
  if (second === undefined) {
    if (operator === 'unaryPlus') return left
    if (operator !== 'unaryMinus') return refuse('This cannot be part of a formula.', left)
    return { kind: 'negative', of: left, index: left.index, length: left.length }
  }
  const right = convert(second, cursor)
  const sign = signOf.get(operator)
  const place = { index: left.index, length: right.index + right.length - left.index }
  if (sign === undefined || Reflect.get(node, 'implicit') === true) {
    return refuse('Write an operator (+ - * / ^) between these two.', place)
  }
  return { kind: 'operator', sign, left, right, ...place }
}

function isNode(value: unknown): value is MathNode {
  return typeof value === 'object' && value !== null && Reflect.get(value, 'isNode') === true
}

function childOf(node: MathNode, key: string): MathNode {
  const child: unknown = Reflect.get(node, key)
  return isNode(child) ? child : refuse('This cannot be part of a formula.', { index: 0, length: 1 })
}

function childrenOf(node: MathNode): MathNode[] {
  const args: unknown = Reflect.get(node, 'args')
  if (!Array.isArray(args)) return []
  return args.map((arg: unknown) =>
    isNode(arg) ? arg : refuse('This cannot be part of a formula.', { index: 0, length: 1 }),
  )
}

function textOf(node: MathNode, key: string): string {
  const text: unknown = Reflect.get(node, key)
  return typeof text === 'string' ? text : ''
}

/** How tightly a shape holds together when written: sums 1, products 2, a minus sign 3, powers 4, the rest 5. */
function tightness(shape: FormulaShape): number {
  if (shape.kind === 'negative') return 3
  if (shape.kind !== 'operator') return 5
  return shape.sign === '^' ? 4 : shape.sign === '*' || shape.sign === '/' ? 2 : 1
}

/** A formula as text, with no more parentheses than it needs; read again it is the same formula. */
export function printFormula(shape: FormulaShape): string {
  switch (shape.kind) {
    case 'number':
      return String(shape.value)
    case 'symbol':
      return shape.name
    case 'call':
      return `${shape.name}(${shape.args.map(printFormula).join(', ')})`
    case 'negative':
      return `-${printInside(shape.of, 4)}`
    case 'operator': {
      if (shape.sign === '^') return `${printInside(shape.left, 5)} ^ ${printInside(shape.right, 4)}`
      const isSum = shape.sign === '+' || shape.sign === '-'
      // A minus sign behind another operator is put in parentheses, for the eye.
      const right = isSum && shape.right.kind !== 'negative' ? 2 : 4
      return `${printInside(shape.left, isSum ? 1 : 2)} ${shape.sign} ${printInside(shape.right, right)}`
    }
  }
}

function printInside(shape: FormulaShape, least: number): string {
  const text = printFormula(shape)
  return tightness(shape) < least ? `(${text})` : text
}

/** The formula without its places, for comparing two. */
export function shapeOf(node: FormulaNode): FormulaShape {
  switch (node.kind) {
    case 'number':
      return { kind: 'number', value: node.value }
    case 'symbol':
      return { kind: 'symbol', name: node.name }
    case 'negative':
      return { kind: 'negative', of: shapeOf(node.of) }
    case 'call':
      return { kind: 'call', name: node.name, args: node.args.map(shapeOf) }
    case 'operator':
      return { kind: 'operator', sign: node.sign, left: shapeOf(node.left), right: shapeOf(node.right) }
  }
}
