/**
 * Units of marker formulas: a dimension is an exponent for each base unit, so that a product, quotient or root of
 * quantities has one too. A temperature in °C is a *point* on a scale with a chosen zero: two points have a difference
 * and no sum, product or ratio.
 */

/** The base units, in the order of a dimension's exponents. */
export const baseUnits = ['min', '°C', 'mm', '%', 'µg/g', 'µg/L'] as const
export type BaseUnit = (typeof baseUnits)[number]

export type Quantity = {
  /** Exponent of each base unit, in the order of `baseUnits`. */
  exponents: readonly number[]
  /** A temperature on the Celsius scale, not a difference. */
  isPoint: boolean
}

/** Units in which an assay may stand, as multiples of a base unit. Content: per dry wood; concentration: per liquid. */
export const assayUnits = {
  'µg/g': { base: 'µg/g', scale: 1 },
  'mg/kg': { base: 'µg/g', scale: 1 },
  'mg/g': { base: 'µg/g', scale: 1000 },
  'ng/g': { base: 'µg/g', scale: 0.001 },
  'µg/L': { base: 'µg/L', scale: 1 },
  'mg/L': { base: 'µg/L', scale: 1000 },
  'ng/L': { base: 'µg/L', scale: 0.001 },
} as const satisfies Record<string, { base: BaseUnit; scale: number }>

export type AssayUnit = keyof typeof assayUnits
export const assayUnitNames = Object.keys(assayUnits).filter(isAssayUnit)

export function isAssayUnit(text: string): text is AssayUnit {
  return Object.hasOwn(assayUnits, text)
}

/** How much of the base unit one `unit` is, 1 for µg/g. */
export function assayScale(unit: AssayUnit): number {
  return assayUnits[unit].scale
}

/** A number without a unit. */
export const pureNumber: Quantity = { exponents: baseUnits.map(() => 0), isPoint: false }

/** A quantity in one base unit. */
export function quantityOf(unit: BaseUnit, isPoint = false): Quantity {
  return { exponents: baseUnits.map((base) => (base === unit ? 1 : 0)), isPoint }
}

export function assayQuantity(unit: AssayUnit): Quantity {
  return quantityOf(assayUnits[unit].base)
}

export function isPure(quantity: Quantity): boolean {
  return !quantity.isPoint && quantity.exponents.every((exponent) => exponent === 0)
}

/** Same dimension, point or not. Exponents from roots are compared to rounding. */
export function isSameDimension(a: Quantity, b: Quantity): boolean {
  return a.exponents.every((exponent, i) => Math.abs(exponent - (b.exponents[i] ?? 0)) < 1e-9)
}

/** The quantity of a product (`sign` 1) or a quotient (`sign` −1). */
export function multiplyQuantities(a: Quantity, b: Quantity, sign: 1 | -1): Quantity {
  return {
    exponents: a.exponents.map((exponent, i) => exponent + sign * (b.exponents[i] ?? 0)),
    isPoint: false,
  }
}

export function powerOfQuantity(a: Quantity, exponent: number): Quantity {
  return { exponents: a.exponents.map((one) => one * exponent), isPoint: false }
}

/** In words for a message: "min", "°C a min", "a pure number", "°C (a temperature)". */
export function nameQuantity(quantity: Quantity): string {
  if (isPure(quantity)) return 'a pure number'
  if (quantity.isPoint) return 'a temperature in °C'
  const part = (sign: 1 | -1) =>
    baseUnits.flatMap((unit, i) => {
      const exponent = sign * (quantity.exponents[i] ?? 0)
      if (exponent <= 0) return []
      return exponent === 1 ? unit : `${unit}^${Number(exponent.toFixed(3))}`
    })
  const above = part(1)
  const below = part(-1)
  if (below.length === 0) return above.join('·')
  return `${above.length === 0 ? '1' : above.join('·')} per ${below.join('·')}`
}
