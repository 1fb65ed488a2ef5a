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
  ],
  experimental: { authInterrupts: true },
}

export default config
