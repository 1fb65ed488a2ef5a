import type { Actor } from '@/lib/auth/actor'
import { forkEm, queryRows } from '@/lib/db/orm'
import { env } from '@/lib/env'
import { sendMail } from '@/lib/mail/send-mail'
import { versionSentForReviewMail } from '@/lib/mail/templates'
import type { RecipeVersionDto } from '@/lib/recipes/schema'
import { currentSite } from '@/lib/site/current-site'

type Reader = { name: string; email: string }

function versionLink(version: RecipeVersionDto): string {
  return new URL(`/recipe-versions/${version.id}`, env().APP_ORIGIN).href
}

/** Tells every active master cooper but the author that a version waits. A mail that cannot go undoes nothing. */
export async function mailReviewers(version: RecipeVersionDto, actor: Actor): Promise<void> {
  const em = await forkEm()
  const reviewers = await queryRows<Reader>(
    em,
    `select name, email from accounts where role = 'master cooper' and state = 'active' and id <> ? order by name`,
    [version.author.id],
  )
  const { name: siteName } = await currentSite(em)
  await Promise.all(
    reviewers.map(({ name, email }) => {
      const mail = versionSentForReviewMail({
        siteName,
        personName: name,
        authorName: actor.name,
        recipeName: version.recipeName,
        versionNumber: version.number,
        link: versionLink(version),
      })
      return sendMail({ to: email, ...mail })
    }),
  )
}

/** Tells the author what became of the version. */
export async function mailAuthor(
  version: RecipeVersionDto,
  actor: Actor,
  outcome: 'approved' | 'returned',
  reason: string | null,
): Promise<void> {
  const [author] = await queryRows<Reader>(
    await forkEm(),
    `select name, email from accounts where id = ? and state = 'active'`,
    [version.author.id],
  )
  if (author === undefined) return
  const paragraphs = [
    `Dear ${author.name},`,
    `${actor.name} has ${outcome} version ${version.number} of ${version.recipeName}.`,
    ...(reason === null ? [] : [`The reason: ${reason}`]),
    outcome === 'approved'
      ? `It may be fired now:\n${versionLink(version)}`
      : `It is a draft again:\n${versionLink(version)}`,
  ]
  await sendMail({
    to: author.email,
    subject: `${outcome === 'approved' ? 'Approved' : 'Returned'}: ${version.recipeName}, version ${version.number}`,
    text: `${paragraphs.join('\n\n')}\n`,
  })
}
