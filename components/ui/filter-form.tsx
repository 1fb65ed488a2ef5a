import type { ReactNode } from 'react'
import { Button } from './button'
import { LinkButton } from './link-button'

/** Filters of a list as a plain form, so that they live in the address; "Clear" while any is set. */
export function FilterForm({
  action,
  values,
  children,
}: {
  action: string
  values: Readonly<Record<string, string>>
  children: ReactNode
}) {
  return (
    <form
      method="get"
      action={action}
      role="search"
      className="mb-4 flex flex-wrap items-end gap-x-3 gap-y-2"
    >
      {children}
      <Button type="submit">Show</Button>
      {Object.keys(values).length === 0 ? null : <LinkButton href={action}>Clear</LinkButton>}
    </form>
  )
}
