import { isAnyAccountThere } from '@/lib/accounts/create-first-administrator-link'
import { forkEm, queryRows } from '@/lib/db/orm'

export type WelcomeDto = {
  /** Null before set-up has named the site. */
  siteName: string | null
  isDemo: boolean
  hasAccounts: boolean
}

/** What the sign-in page may tell anybody. */
export async function getWelcome(): Promise<WelcomeDto> {
  const em = await forkEm()
  const [site] = await queryRows<{ name: string; is_demo: boolean }>(
    em,
    'select name, is_demo from site_settings order by version desc limit 1',
  )
  return {
    siteName: site?.name ?? null,
    isDemo: site?.is_demo === true,
    hasAccounts: await isAnyAccountThere(em),
  }
}
