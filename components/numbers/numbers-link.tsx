import Link from 'next/link'

/** Stands by every score. */
export function NumbersLink() {
  return (
    <Link href="/how-the-numbers-are-made" className="underline underline-offset-3">
      How the numbers are made
    </Link>
  )
}
