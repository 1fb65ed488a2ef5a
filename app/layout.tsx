import type { Metadata, Viewport } from 'next'
import localFont from 'next/font/local'
import type { ReactNode } from 'react'
import './globals.css'

const next = localFont({
  src: '../node_modules/@fontsource-variable/atkinson-hyperlegible-next/files/atkinson-hyperlegible-next-latin-wght-normal.woff2',
  weight: '200 800',
  style: 'normal',
  display: 'swap',
  variable: '--font-next',
})

/** Letters beyond Latin 1 (names such as Čapek); fetched only when a page has one. */
const nextExt = localFont({
  src: '../node_modules/@fontsource-variable/atkinson-hyperlegible-next/files/atkinson-hyperlegible-next-latin-ext-wght-normal.woff2',
  weight: '200 800',
  style: 'normal',
  display: 'swap',
  preload: false,
  adjustFontFallback: false,
  declarations: [
    {
      prop: 'unicode-range',
      value:
        'U+0100-02BA,U+02BD-02C5,U+02C7-02CC,U+02CE-02D7,U+02DD-02FF,U+1E00-1E9F,U+1EF2-1EFF,U+20A0-20AB,U+20AD-20C0',
    },
  ],
  variable: '--font-next-ext',
})

const code = localFont({
  src: '../node_modules/@fontsource-variable/atkinson-hyperlegible-mono/files/atkinson-hyperlegible-mono-latin-wght-normal.woff2',
  weight: '200 800',
  style: 'normal',
  display: 'swap',
  preload: false,
  adjustFontFallback: false,
  variable: '--font-code',
})

export const metadata: Metadata = {
  title: { default: 'Emberstave', template: '%s · Emberstave' },
  description: 'The recipe book, the fireside console and the firing log of a toasting room.',
  robots: { index: false, follow: false },
  appleWebApp: { title: 'Emberstave', statusBarStyle: 'black-translucent' },
  formatDetection: { telephone: false, date: false, address: false, email: false },
}

/** Each page carries a nonce of its own, so none is made beforehand. */
export const dynamic = 'force-dynamic'

export const viewport: Viewport = {
  width: 'device-width',
  initialScale: 1,
  themeColor: '#f8fbfc',
}

export default function RootLayout({ children }: { children: ReactNode }) {
  return (
    <html lang="en" className={`${next.variable} ${nextExt.variable} ${code.variable}`}>
      <body>{children}</body>
    </html>
  )
}
