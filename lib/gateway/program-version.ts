import packageJson from '@/package.json' with { type: 'json' }

/** Version of the gateway program: that of the package it comes in. */
export const programVersion: string = packageJson.version
