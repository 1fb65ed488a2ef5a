import type { Cluster } from './postgres.mjs'

export declare function testDatabaseEnvironment(cluster: Cluster): {
  TEST_DATABASE_ADMIN_URL: string
  TEST_APP_ROLE_PASSWORD: string
}
