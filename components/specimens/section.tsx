import type { ReactNode } from 'react'

/** A numbered part of the specimens page. */
export function Section({
  title,
  children,
  isFireside = false,
}: {
  title: string
  children: ReactNode
  isFireside?: boolean
}) {
  return (
    <section data-ground={isFireside ? 'fireside' : undefined} className="border-t border-line px-7 py-6">
      <h2 className="mb-4 text-large">{title}</h2>
      {children}
    </section>
  )
}
