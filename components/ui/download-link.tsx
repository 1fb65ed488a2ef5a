import type { ReactNode } from 'react'
import { buttonClass } from './button-style'

/** A button that saves a file of ours: an anchor of the browser's own, since a page link would be fetched ahead. */
export function DownloadLink({ href, children }: { href: string; children: ReactNode }) {
  return (
    <a href={href} className={buttonClass('plain')} download>
      {children}
    </a>
  )
}
