import type { TestDatabase } from '@/tests/support/database'

/** Points this process at a test database, as `npm start` would point a server. Call it before any verb. */
export function setTestEnvironment(database: Pick<TestDatabase, 'databaseUrl'>): void {
  Object.assign(process.env, {
    DATABASE_URL: database.databaseUrl,
    SESSION_SECRET: 'a secret for tests only, of no worth anywhere',
    APP_ORIGIN: testOrigin,
    EMBERSTAVE_MODE: 'test',
    LOG_LEVEL: process.env['TEST_LOG_LEVEL'] ?? 'silent',
  })
}

/** Where the tests' server says it is. */
export const testOrigin = 'http://127.0.0.1:3000'
