'use client'

import { Button } from '@/components/ui/button'
import './globals.css'

/** Stands in for the whole document when even the root layout failed. */
export default function GlobalError({ retry }: { error: unknown; retry: () => void }) {
  return (
    <html lang="en">
      <head>
        <title>Emberstave</title>
      </head>
      <body>
        <main className="mx-auto max-w-[34rem] px-7 pt-[12vh]">
          <h1>Emberstave did not come up</h1>
          <p className="mt-3">
            The fault is ours. Readings go on being kept by the gateways meanwhile. Try again in a moment.
          </p>
          <p className="mt-4">
            <Button kind="due" onClick={() => retry()}>
              Try again
            </Button>
          </p>
        </main>
      </body>
    </html>
  )
}
