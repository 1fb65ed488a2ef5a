/** Collects conditions and their parameters for a list's WHERE, always with placeholders. */
export function sqlFilters() {
  const conditions: string[] = []
  const parameters: unknown[] = []
  return {
    parameters,
    add(condition: string, ...values: unknown[]): void {
      conditions.push(condition)
      parameters.push(...values)
    },
    /** Any of the expressions contains the words, letter case aside. */
    addLike(expressions: readonly string[], words: string): void {
      const pattern = `%${words.replace(/[\\%_]/g, (letter) => `\\${letter}`)}%`
      conditions.push(`(${expressions.map((expression) => `${expression} ilike ?`).join(' or ')})`)
      parameters.push(...expressions.map(() => pattern))
    },
    where(): string {
      return conditions.length === 0 ? '' : `where ${conditions.join(' and ')}`
    },
  }
}
