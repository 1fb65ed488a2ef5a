import type { EntityManager } from '@mikro-orm/postgresql'
import type * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { readLotSymbols, readMarker } from '@/lib/markers/read-markers'
import type { checkFormulaSchema, CheckedFormula, FormulaExample } from '@/lib/markers/schema'
import { toastFactsOf } from '@/lib/markers/toast-facts'
import { toContent } from '@/lib/recipes/to-version'
import { versionRowsByIds } from '@/lib/recipes/version-rows'
import type { CompiledFormula } from '@/lib/science/formula'
import { compileFormula } from '@/lib/science/formula'
import { currentSite } from '@/lib/site/current-site'

const mostExamples = 8

/**
 * Reads a formula as one types it: its fault with the place, or its plain form and what it gives for approved recipes.
 * Stores nothing.
 */
export async function checkMarkerFormula(
  actor: Actor,
  input: z.infer<typeof checkFormulaSchema> & { id: string },
): Promise<CheckedFormula> {
  requirePermission(actor, 'markers:write')
  const em = await forkEm()
  await readMarker(em, input.id)
  const compiled = compileFormula(input.formula, {
    unit: input.unit,
    lotSymbols: await readLotSymbols(em),
  })
  if (!compiled.ok) return compiled
  return {
    ok: true,
    formula: compiled.text,
    unit: compiled.unit,
    isPureNumber: compiled.isPureNumber,
    examples: await readExamples(em, compiled),
  }
}

async function readExamples(em: EntityManager, compiled: CompiledFormula): Promise<FormulaExample[]> {
  const ids = await queryRows<{ id: string }>(
    em,
    `select v.id from recipe_versions v join recipes r on r.id = v.recipe_id
      where v.state = 'approved' order by lower(r.name) limit ?`,
    [mostExamples],
  )
  const { rules } = await currentSite(em)
  const rows = await versionRowsByIds(
    em,
    ids.map(({ id }) => id),
  )
  return rows
    .map((row): FormulaExample => {
      const facts = toastFactsOf(toContent(row), rules, compiled.symbols.includes('toast_depth'))
      const value = compiled.evaluate(facts.formula())
      return {
        versionId: row.id,
        recipeName: row.recipe_name,
        versionNumber: row.number,
        value: value.isKnown ? value.value : null,
        reason: value.isKnown ? null : value.reason,
      }
    })
    .sort((one, other) => one.recipeName.localeCompare(other.recipeName))
}
