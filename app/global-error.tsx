'use client'

import { FailedPage } from '@/components/ui/failed-page'
import './globals.css'

/** Stands in for the whole document when even the root layout failed. */
export default function GlobalError() {
  return (
    <html lang="en">
      <head>
        <title>Emberstave</title>
      </head>
      <body>
        <main>
          <FailedPage title="Emberstave did not come up" onRetry={() => window.location.reload()} />
        </main>
      </body>
    </html>
  )
}
