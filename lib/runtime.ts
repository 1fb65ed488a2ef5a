/**
 * State that the server, the route bundle and the page bundle share. Each has its own copy of every module, so
 * what must exist once in the process hangs on globalThis under a registered symbol.
 */
export function shared<T>(name: string, make: () => T): T {
  const key = Symbol.for(`emberstave.${name}`)
  if (!Reflect.has(globalThis, key)) Reflect.set(globalThis, key, make())
  return Reflect.get(globalThis, key)
}

type Clock = { read: () => number }

function clock(): Clock {
  return shared('clock', () => ({ read: Date.now }))
}

/** This instant, from the one clock. */
export function now(): Date {
  return new Date(clock().read())
}

/** This instant in milliseconds since 1970 UTC, from the one clock. */
export function nowMs(): number {
  return clock().read()
}

/**
 * Lets tests and seeds set or speed the clock; pass null to go back to the machine's.
 * @throws Error when the mode is serve: production's clock is the machine's.
 */
export function setClock(read: (() => number) | null): void {
  if (process.env['EMBERSTAVE_MODE'] === 'serve') throw new Error('The clock cannot be set in production.')
  clock().read = read ?? Date.now
}
