/** A place inside the app to go back to after signing in; anything that leads elsewhere is the start page. */
export function safeNextPath(text: string | null | undefined): string {
  if (text === null || text === undefined || !/^\/(?![/\\])/.test(text) || /[\u0000-\u001f]/.test(text))
    return '/'
  const base = 'http://inside.invalid'
  const url = new URL(text, base)
  return url.origin === base && !url.pathname.startsWith('/api/')
    ? `${url.pathname}${url.search}${url.hash}`
    : '/'
}

/** Set by the proxy on the request of a page: its own path and query. */
export const pagePathHeader = 'x-emberstave-path'
