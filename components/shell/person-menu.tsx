import Link from 'next/link'
import { SignOutButton } from './sign-out-button'

export type ShellPerson = {
  name: string
  /** "master cooper" */
  roleName: string
  accountHref: string
}

const itemClass = 'block w-full px-4 py-2 text-left hover:bg-wash'

/** The person's name and role; opens account and sign-out. The browser's popover closes it on Escape and outside. */
export function PersonMenu({ person }: { person: ShellPerson }) {
  return (
    <>
      <button type="button" popoverTarget="person-menu" className="py-1 text-soft hover:text-text">
        {person.name}, {person.roleName}
      </button>
      <div
        id="person-menu"
        popover="auto"
        className="absolute inset-auto top-[46px] right-7 m-0 min-w-48 rounded-control border border-line bg-raised py-1 text-text shadow-float"
      >
        <Link href={person.accountHref} className={itemClass}>
          Account and units
        </Link>
        <SignOutButton className={itemClass} />
      </div>
    </>
  )
}
