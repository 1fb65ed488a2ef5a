import { createFirstAdministratorLink } from '@/lib/accounts/create-first-administrator-link'
import { systemActor } from '@/lib/auth/actor'
import { closeOrm } from '@/lib/db/orm'
import { createSite, isSiteThere, unnamedSite } from '@/lib/site/create-site'

/**
 * Run by `npm run serve` after migrating, with the server's whole environment: writes the first settings of the site
 * if there are none, and while no account exists prints the one-time link that makes the first administrator.
 */
async function main(): Promise<void> {
  if (!(await isSiteThere())) await createSite(systemActor('set-up'), unnamedSite)
  const link = await createFirstAdministratorLink()
  if (link === null) return
  console.log('Nobody has an account yet. Make the first administrator with this link; it serves once,')
  console.log(`until ${link.expiresAt.toISOString()}; starting again prints a new one:`)
  console.log(`  ${link.url}`)
}

try {
  await main()
} catch (error) {
  console.error(error instanceof Error ? error.message : error)
  process.exitCode = 1
} finally {
  await closeOrm()
}
