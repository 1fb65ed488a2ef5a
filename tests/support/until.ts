/** Waits until something holds; looks every 20 ms. */
export async function until(what: () => boolean | Promise<boolean>, withinMs = 20_000): Promise<void> {
  for (const startedAt = Date.now(); !(await what());) {
    if (Date.now() - startedAt > withinMs) throw new Error(`it did not come to hold within ${withinMs} ms`)
    await new Promise((resolve) => setTimeout(resolve, 20))
  }
}
