import Link from 'next/link'
import { PlainShell } from '@/components/shell/plain-shell'

export const metadata = { title: 'Not found' }

export default function NotFound() {
  return (
    <PlainShell>
      <h1>Not here</h1>
      <p className="mt-3">
        There is nothing at this address that you may open. It may have been moved, or the link may be cut
        short.
      </p>
      <p className="mt-3">
        <Link href="/" className="link">
          Go to the start
        </Link>
      </p>
    </PlainShell>
  )
}
