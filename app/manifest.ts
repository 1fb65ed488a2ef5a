import type { MetadataRoute } from 'next'

/** For installing to the home screen; the same for everybody, so that it can be fetched without a cookie. */
export default function manifest(): MetadataRoute.Manifest {
  return {
    id: '/',
    name: 'Emberstave',
    short_name: 'Emberstave',
    description: 'The fireside console of a toasting room.',
    start_url: '/',
    scope: '/',
    display: 'standalone',
    orientation: 'any',
    background_color: '#10161a',
    theme_color: '#10161a',
    icons: [
      { src: '/icons/icon-192.png', sizes: '192x192', type: 'image/png' },
      { src: '/icons/icon-512.png', sizes: '512x512', type: 'image/png' },
      { src: '/icons/icon-maskable-512.png', sizes: '512x512', type: 'image/png', purpose: 'maskable' },
    ],
  }
}
