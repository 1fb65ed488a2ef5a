/**
 * The domain checks that every function of this folder shares. Each throws a `RangeError` whose message begins
 * with the argument's name, so that a caller can put it beside the right field.
 */

/** Returns `value` when it is a finite number, otherwise throws a `RangeError` that names `name`. */
export function requireFinite(name: string, value: number): number {
  if (!Number.isFinite(value)) throw new RangeError(`${name} must be a finite number, not ${value}`)
  return value
}

/** Returns `value` when it is finite and above zero, otherwise throws a `RangeError` that names `name`. */
export function requirePositive(name: string, value: number): number {
  if (!(Number.isFinite(value) && value > 0)) {
    throw new RangeError(`${name} must be a finite number above 0, not ${value}`)
  }
  return value
}

/** Returns `value` when it is finite and not below zero, otherwise throws a `RangeError` that names `name`. */
export function requireNotNegative(name: string, value: number): number {
  if (!(Number.isFinite(value) && value >= 0)) {
    throw new RangeError(`${name} must be a finite number of 0 or more, not ${value}`)
  }
  return value
}

/** Returns `value` when it lies in [low, high], both included; otherwise throws a `RangeError` that names `name`. */
export function requireWithin(name: string, value: number, low: number, high: number): number {
  if (!(value >= low && value <= high)) {
    throw new RangeError(`${name} must lie from ${low} to ${high}, not ${value}`)
  }
  return value
}

/** Returns `value` when it is a whole number of at least `least`; otherwise throws a `RangeError` that names `name`. */
export function requireWhole(name: string, value: number, least: number): number {
  if (!(Number.isSafeInteger(value) && value >= least)) {
    throw new RangeError(`${name} must be a whole number of at least ${least}, not ${value}`)
  }
  return value
}

/** Returns a lower-tail probability when it lies strictly between 0 and 1; otherwise throws a `RangeError`. */
export function requireProbability(name: string, value: number): number {
  if (!(value > 0 && value < 1))
    throw new RangeError(`${name} must lie strictly between 0 and 1, not ${value}`)
  return value
}

/** Returns `values` when there are at least `least` of them and all are finite; otherwise throws a `RangeError`. */
export function requireNumbers<T extends ArrayLike<number>>(name: string, values: T, least = 1): T {
  if (values.length < least) {
    throw new RangeError(
      `${name} must hold at least ${least} number${least === 1 ? '' : 's'}, not ${values.length}`,
    )
  }
  for (let i = 0; i < values.length; i += 1) {
    const value = values[i]
    if (value === undefined || !Number.isFinite(value)) {
      throw new RangeError(`${name}[${i}] must be a finite number, not ${value}`)
    }
  }
  return values
}

/** Throws a `RangeError` that names both unless `second` is as long as `first`. */
export function requireEqualLength(
  firstName: string,
  first: ArrayLike<unknown>,
  secondName: string,
  second: ArrayLike<unknown>,
): void {
  if (first.length !== second.length) {
    throw new RangeError(
      `${secondName} must be as long as ${firstName}: ${second.length} against ${first.length}`,
    )
  }
}
