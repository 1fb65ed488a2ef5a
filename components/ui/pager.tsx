import { LinkButton } from './link-button'

/** The way through a long list by cursor. Absent links are left out; nothing shows when all fits. */
export function Pager({
  firstHref,
  previousHref,
  nextHref,
  words,
}: {
  firstHref?: string
  previousHref?: string
  nextHref?: string
  /** What is shown: "21 to 40 of 120 firings". */
  words?: string
}) {
  if (firstHref === undefined && previousHref === undefined && nextHref === undefined && words === undefined)
    return null
  return (
    <nav aria-label="Pages of this list" className="mt-3 flex flex-wrap items-center gap-2">
      {firstHref === undefined ? null : <LinkButton href={firstHref}>First</LinkButton>}
      {previousHref === undefined ? null : (
        <LinkButton href={previousHref} rel="prev">
          Earlier page
        </LinkButton>
      )}
      {nextHref === undefined ? null : (
        <LinkButton href={nextHref} rel="next">
          Next page
        </LinkButton>
      )}
      {words === undefined ? null : <p className="ml-1 text-soft">{words}</p>}
    </nav>
  )
}
