import type { NextConfig } from 'next'

const config: NextConfig = {
  reactStrictMode: true,
  poweredByHeader: false,
  serverExternalPackages: [
    '@mikro-orm/core',
    '@mikro-orm/postgresql',
    '@mikro-orm/knex',
    '@mikro-orm/migrations',
    '@node-rs/argon2',
    'pino',
    'nodemailer',
    'pg',
    'sharp',
    'file-type',
    '@aws-sdk/client-s3',
    '@aws-sdk/s3-request-presigner',
  ],
  // A build's cache on disk takes longer to write than it saves: builds are rare and hashed by lib/setup/build.mjs.
  // The development cache on disk can outlive the chunks it names; then every page reloads without end.
  experimental: {
    authInterrupts: true,
    // A photo passes the proxy whole (lib/firings/photo-schema.ts holds its limit); the default cuts it at 10 MB.
    proxyClientMaxBodySize: '16mb',
    turbopackFileSystemCacheForBuild: false,
    turbopackFileSystemCacheForDev: false,
  },
  // Types are held once, by `npm run check` and by tests/types.test.ts, instead of again in every build.
  typescript: { ignoreBuildErrors: true },
}

export default config
