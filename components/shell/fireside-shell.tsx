import type { ReactNode } from 'react'

/** The fireside: dark, edge to edge, no bar. */
export function FiresideShell({ alarm, children }: { alarm?: ReactNode; children: ReactNode }) {
  return (
    <div data-ground="fireside" className="flex min-h-dvh flex-col">
      {alarm}
      <main id="main" tabIndex={-1} className="flex min-h-0 flex-1 flex-col">
        {children}
      </main>
    </div>
  )
}
