import Link from 'next/link'
import { PlainShell } from '@/components/shell/plain-shell'

export const metadata = { title: 'Not allowed' }

export default function Forbidden() {
  return (
    <PlainShell>
      <h1>Not for your role</h1>
      <p className="mt-3">
        This page needs another role than yours. Ask your administrator if it should be yours.
      </p>
      <p className="mt-3">
        <Link href="/" className="link">
          Go to the start
        </Link>
      </p>
    </PlainShell>
  )
}
