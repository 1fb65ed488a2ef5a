'use client'

import { useRouter } from 'next/navigation'
import { useEffect, useState } from 'react'
import { ConfirmDialog } from '@/components/ui/confirm-dialog'

/** Asks before a page with something unsaved is left: by the browser's own question, and by a dialog for links inside. */
export function LeaveWarning({ isUnsaved }: { isUnsaved: boolean }) {
  const router = useRouter()
  const [href, setHref] = useState<string | null>(null)

  useEffect(() => {
    if (!isUnsaved) return
    const warn = (event: BeforeUnloadEvent) => event.preventDefault()
    const catchLink = (event: MouseEvent) => {
      const link = event.target instanceof Element ? event.target.closest('a[href]') : null
      const isPlain = event.button === 0 && !event.ctrlKey && !event.metaKey && !event.shiftKey
      if (!(link instanceof HTMLAnchorElement) || !isPlain || link.target === '_blank') return
      if (link.origin !== location.origin || link.getAttribute('href')?.startsWith('#')) return
      event.preventDefault()
      event.stopPropagation()
      setHref(link.href)
    }
    window.addEventListener('beforeunload', warn)
    document.addEventListener('click', catchLink, true)
    return () => {
      window.removeEventListener('beforeunload', warn)
      document.removeEventListener('click', catchLink, true)
    }
  }, [isUnsaved])

  return (
    <ConfirmDialog
      isOpen={href !== null}
      onClose={() => setHref(null)}
      title="Leave without saving?"
      confirmLabel="Leave"
      isDanger
      onConfirm={async () => {
        if (href !== null) router.push(href.slice(location.origin.length))
        return null
      }}
    >
      What you changed since the last save is lost when you leave this page.
    </ConfirmDialog>
  )
}
