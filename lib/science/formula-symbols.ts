import type { AssayUnit, Quantity } from './formula-units'
import { assayQuantity, assayScale, isPure, nameQuantity, pureNumber, quantityOf } from './formula-units'

/**
 * Everything that a marker formula may name, as data: nothing outside these lists is reachable. Quantities are those
 * of one toast: a plan's exact ones, or a firing's.
 */

export type FormulaSymbol = {
  name: string
  quantity: Quantity
  /** The unit in words, for the list beside the editor. */
  unit: string
  meaning: string
  /** A symbol that is the same everywhere has its value here; others are given with the facts of a toast. */
  constant: number | null
  /** A lot's assay before the fire, which a recipe does not know. */
  isLotAssay: boolean
}

export type FormulaFunction = {
  name: FunctionName
  /** As it is written, with its arguments: "min(a, b, …)". */
  form: string
  meaning: string
  fewest: number
  most: number
}

export type FunctionName =
  'exp' | 'ln' | 'log10' | 'sqrt' | 'abs' | 'min' | 'max' | 'celsius' | 'stage_minutes' | 'stage_target'

/** Most stages of a recipe, and so the last place that a formula may name. */
export const mostStages = 24

export const formulaFunctions: readonly FormulaFunction[] = [
  {
    name: 'stage_minutes',
    form: 'stage_minutes(n)',
    meaning: 'Length of the n-th stage of the fire, min',
    fewest: 1,
    most: 1,
  },
  {
    name: 'stage_target',
    form: 'stage_target(n)',
    meaning: 'Wood temperature at the end of the n-th stage, a temperature in °C',
    fewest: 1,
    most: 1,
  },
  {
    name: 'celsius',
    form: 'celsius(200)',
    meaning: 'A temperature of that many °C, to subtract from another one',
    fewest: 1,
    most: 1,
  },
  { name: 'exp', form: 'exp(a)', meaning: 'e to the power a; a is a pure number', fewest: 1, most: 1 },
  { name: 'ln', form: 'ln(a)', meaning: 'Natural logarithm; a is a pure number above 0', fewest: 1, most: 1 },
  {
    name: 'log10',
    form: 'log10(a)',
    meaning: 'Logarithm to base 10; a is a pure number above 0',
    fewest: 1,
    most: 1,
  },
  { name: 'sqrt', form: 'sqrt(a)', meaning: 'Square root', fewest: 1, most: 1 },
  { name: 'abs', form: 'abs(a)', meaning: 'Size without its sign', fewest: 1, most: 1 },
  { name: 'min', form: 'min(a, b)', meaning: 'The smallest of two to six of one unit', fewest: 2, most: 6 },
  { name: 'max', form: 'max(a, b)', meaning: 'The largest of two to six of one unit', fewest: 2, most: 6 },
]

function symbol(
  name: string,
  quantity: Quantity,
  meaning: string,
  more: Partial<Pick<FormulaSymbol, 'constant' | 'isLotAssay' | 'unit'>> = {},
): FormulaSymbol {
  const unit = isPure(quantity) ? 'number' : nameQuantity(quantity)
  return { name, quantity, unit, meaning, constant: null, isLotAssay: false, ...more }
}

/** The symbols of every formula; those of lot assays are made by `lotAssaySymbol`, one for each marker of the list. */
export const formulaSymbols: readonly FormulaSymbol[] = [
  symbol(
    'dose',
    quantityOf('min'),
    'Heat dose of the toast at the lead probe’s depth, minutes at the site’s reference temperature',
  ),
  symbol('log10_dose', pureNumber, 'Logarithm to base 10 of that dose in minutes'),
  symbol(
    'slow_index',
    quantityOf('min'),
    'Slow index of the toast, minutes at the reference temperature (illustrative)',
  ),
  symbol(
    'fast_index',
    quantityOf('min'),
    'Fast index of the toast, minutes at the reference temperature (illustrative)',
  ),
  symbol('toast_depth', quantityOf('mm'), 'Deepest point that counts as toasted, by the stave model'),
  symbol(
    'preheat_moisture',
    quantityOf('%'),
    'Stave moisture before the fire; of a recipe the middle of its band',
  ),
  symbol('fire_minutes', quantityOf('min'), 'Length of all stages together'),
  symbol('stage_count', pureNumber, 'How many stages the fire has'),
  symbol('minute', quantityOf('min'), 'One minute: dose / minute is a pure number', { constant: 1 }),
  symbol('degree', quantityOf('°C'), 'A difference of one °C', { constant: 1 }),
  symbol('mm', quantityOf('mm'), 'One millimetre', { constant: 1 }),
  symbol('percent', quantityOf('%'), 'One per cent of moisture', { constant: 1 }),
  symbol('ug_per_g', quantityOf('µg/g'), 'One µg in a g of dry wood', { constant: 1 }),
  symbol('ug_per_l', quantityOf('µg/L'), 'One µg in a litre', { constant: 1 }),
]

/** A lot's assay of one marker before the fire: its symbol is "lot_" and the marker's key. */
export function lotAssaySymbol(marker: { key: string; name: string; unit: AssayUnit }): FormulaSymbol {
  return symbol(
    `lot_${marker.key}`,
    assayQuantity(marker.unit),
    `${marker.name} of the wood lot before the fire`,
    { isLotAssay: true },
  )
}

/** The value of a lot's assay in the base unit that formulas compute in. */
export function inBaseUnit(value: number, unit: AssayUnit): number {
  return value * assayScale(unit)
}

const byFunctionName = new Map(formulaFunctions.map((one) => [String(one.name), one]))

export function functionNamed(name: string): FormulaFunction | undefined {
  return byFunctionName.get(name)
}
