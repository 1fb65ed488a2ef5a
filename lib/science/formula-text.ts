import { functionNamed } from './formula-symbols'

/** Where a formula is wrong, 0-based, and a sentence that says what and how to mend it. */
export type FormulaFault = { message: string; index: number; length: number }

/** How large a formula may be. Everything that is done with one is bounded by these, so no clock is needed. */
export const formulaLimits = { letters: 400, tokens: 160, depth: 12, nodes: 120 } as const

export type Token = {
  kind: 'number' | 'name' | 'operator' | 'open' | 'close' | 'comma'
  /** As mathjs reads it. */
  text: string
  index: number
  length: number
}

/** Signs that a person or a spreadsheet writes for the plain ones; each is one letter long, so places stay right. */
const plainSigns: Readonly<Record<string, string>> = { '−': '-', '–': '-', '×': '*', '·': '*', '÷': '/' }

const advice: Readonly<Record<string, string>> = {
  log: 'Write ln for the natural logarithm or log10 for the one to base 10.',
  pi: 'Write the number.',
  e: 'Write exp(1).',
  C: 'Write celsius(200) for a temperature, degree for a difference.',
  degC: 'Write celsius(200) for a temperature, degree for a difference.',
}

const signAdvice: Readonly<Record<string, string>> = {
  '"': 'A formula has no text in it.',
  "'": 'A formula has no text in it.',
  '`': 'A formula has no text in it.',
  '=': 'A formula is one expression: it sets nothing.',
  '.': 'A point stands only inside a number.',
  ';': 'A formula is one expression.',
  '\n': 'Write the formula on one line.',
  '[': 'A formula has no lists.',
  ']': 'A formula has no lists.',
  '{': 'A formula has no lists.',
  '}': 'A formula has no lists.',
  '%': 'Write percent for one per cent of moisture: preheat_moisture / percent.',
  '°': 'Write celsius(200) for a temperature, degree for a difference.',
}

/** Digits with at most one point and an exponent; a point needs a digit before it. */
const numberPattern = /\d+(?:\.\d+)?(?:e[+-]?\d{1,3})?/y
const namePattern = /[A-Za-z][A-Za-z0-9_]*/y
const operators = '+-*/^'

export type Lexed = { ok: true; tokens: Token[]; text: string } | { ok: false; fault: FormulaFault }

function fault(message: string, index: number, length = 1): { ok: false; fault: FormulaFault } {
  return { ok: false, fault: { message, index, length: Math.max(1, length) } }
}

/**
 * Cuts a formula into numbers, names, + − * / ^, parentheses and commas, and refuses everything else with its place,
 * before any parser sees it. Names are those of `isKnown` and of the closed list of functions; a function's name stands
 * before "(", a symbol's never does; two operands need an operator between them.
 */
export function lexFormula(source: string, isKnown: (symbol: string) => boolean): Lexed {
  if (source.trim() === '') return fault('Write a formula, for example 2 * log10_dose.', 0)
  if (source.length > formulaLimits.letters) {
    const over = source.length - formulaLimits.letters
    return fault(`A formula has at most ${formulaLimits.letters} letters.`, formulaLimits.letters, over)
  }
  const read = readTokens(source)
  if (!read.ok) return read
  if (read.tokens.length > formulaLimits.tokens) {
    const first = read.tokens[formulaLimits.tokens]
    return fault('This formula is too long to be looked over: split it.', first?.index ?? 0, first?.length)
  }
  const text = [...source].map((sign) => plainSigns[sign] ?? sign).join('')
  return (
    checkNames(read.tokens, isKnown) ?? checkNesting(read.tokens) ?? { ok: true, tokens: read.tokens, text }
  )
}

function readTokens(source: string): { ok: true; tokens: Token[] } | { ok: false; fault: FormulaFault } {
  const tokens: Token[] = []
  let index = 0
  const take = (kind: Token['kind'], text: string) => {
    tokens.push({ kind, text, index, length: text.length })
    index += text.length
  }
  while (index < source.length) {
    const sign = source.charAt(index)
    if (sign === ' ' || sign === '\t') {
      index += 1
      continue
    }
    const number = matchAt(numberPattern, source, index)
    const name = number === null ? matchAt(namePattern, source, index) : null
    const plain = plainSigns[sign] ?? sign
    if (number !== null) {
      const value = Number(number)
      if (!Number.isFinite(value) || (value === 0 && /[1-9]/.test(number.replace(/e.*/, '')))) {
        return fault('This number is beyond what can be computed with.', index, number.length)
      }
      const after = source.charAt(index + number.length)
      if (after === ',' && /\d/.test(source.charAt(index + number.length + 1))) {
        const sentence = 'Write a decimal mark as a point, 0.5, or a space after a comma between two values.'
        return fault(sentence, index + number.length)
      }
      if (after === '.')
        return fault('Write the number with one point and a digit after it.', index, number.length + 1)
      if (/[A-Za-z_]/.test(after))
        return fault('Write * between a number and what it multiplies.', index + number.length)
      take('number', number)
    } else if (name !== null) take('name', name)
    else if (operators.includes(plain)) take('operator', plain)
    else if (sign === '(') take('open', sign)
    else if (sign === ')') take('close', sign)
    else if (sign === ',') take('comma', sign)
    else return fault(signAdvice[sign] ?? 'This sign has no meaning in a formula.', index)
  }
  return { ok: true, tokens }
}

function matchAt(pattern: RegExp, source: string, index: number): string | null {
  pattern.lastIndex = index
  return pattern.exec(source)?.[0] ?? null
}

function checkNames(
  tokens: readonly Token[],
  isKnown: (symbol: string) => boolean,
): { ok: false; fault: FormulaFault } | null {
  for (const [i, token] of tokens.entries()) {
    if (token.kind !== 'name') continue
    const { text, index, length } = token
    const isCalled = tokens[i + 1]?.kind === 'open'
    const isFunction = functionNamed(text) !== undefined
    if (isFunction && !isCalled)
      return fault(`Write what ${text} is taken of, in parentheses: ${text}( … ).`, index, length)
    if (!isFunction && isKnown(text) && isCalled) {
      return fault(
        `${text} is a quantity and no function. Write * between it and the parenthesis.`,
        index,
        length,
      )
    }
    if (!isFunction && !isKnown(text)) {
      const help = Object.hasOwn(advice, text) ? advice[text] : 'Take one from the list.'
      return fault(`There is no ${isCalled ? 'function' : 'quantity'} ${text}. ${help}`, index, length)
    }
  }
  return null
}

/** Parentheses match and are not too deep; a comma stands inside a call only; operands have operators between them. */
function checkNesting(tokens: readonly Token[]): { ok: false; fault: FormulaFault } | null {
  const open: { token: Token; isCall: boolean }[] = []
  for (const [i, token] of tokens.entries()) {
    const before = tokens[i - 1]
    const isOperandBefore = before?.kind === 'number' || before?.kind === 'close' || before?.kind === 'name'
    const isCall = token.kind === 'open' && before?.kind === 'name'
    const isOperand = token.kind === 'number' || token.kind === 'name' || token.kind === 'open'
    if (isOperand && isOperandBefore && !isCall) {
      return fault('Write an operator (+ - * / ^) between these two.', token.index, token.length)
    }
    if (token.kind === 'open') {
      open.push({ token, isCall })
      if (open.length > formulaLimits.depth) {
        return fault(`Parentheses are nested more than ${formulaLimits.depth} deep.`, token.index)
      }
    }
    if (token.kind === 'close') {
      const opened = open.pop()
      if (opened === undefined) return fault('This parenthesis closes nothing.', token.index)
      if (before?.kind === 'open') return fault('There is nothing between these parentheses.', token.index)
    }
    if (token.kind === 'comma' && open.at(-1)?.isCall !== true) {
      return fault(
        'A comma stands only between the arguments of a function. Write a decimal mark as a point.',
        token.index,
      )
    }
    const needsOperand = token.kind === 'close' || token.kind === 'comma'
    if (needsOperand && (before?.kind === 'operator' || before?.kind === 'comma')) {
      return fault('Something is missing before this sign.', token.index)
    }
  }
  const last = open.at(-1)
  return last === undefined ? null : fault('This parenthesis is never closed.', last.token.index)
}
