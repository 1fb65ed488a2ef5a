'use client'

import { Button } from '@/components/ui/button'

/** The browser's own print dialog; the page has print styles. */
export function PrintButton() {
  return <Button onClick={() => window.print()}>Print</Button>
}
