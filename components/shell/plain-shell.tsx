import type { ReactNode } from 'react'

/** A page before sign-in or outside the app: one narrow column under the name. */
export function PlainShell({ children }: { children: ReactNode }) {
  return (
    <div className="mx-auto min-h-dvh max-w-[26rem] px-7 pt-[12vh] pb-12">
      <header className="mb-6 text-[17px] font-[720]">Emberstave</header>
      <main id="main" tabIndex={-1}>
        {children}
      </main>
    </div>
  )
}
