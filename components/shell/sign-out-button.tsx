'use client'

import { useState } from 'react'

/** Ends the session and goes to the sign-in page. */
export function SignOutButton({ className }: { className?: string }) {
  const [words, setWords] = useState('Sign out')
  async function signOut() {
    setWords('Signing out')
    const answer = await fetch('/api/session', { method: 'DELETE' }).catch(() => null)
    if (answer !== null && (answer.ok || answer.status === 401)) window.location.assign('/sign-in')
    else setWords('Not signed out. Try again')
  }
  return (
    <button type="button" className={className} onClick={() => void signOut()}>
      {words}
    </button>
  )
}
