import { databaseUrl } from './postgres.mjs'

/**
 * What the tests are told about their cluster: an address that may create databases (the owner's, connected to
 * `postgres`) and the password of the server's role.
 *
 * @param {import('./postgres.mjs').Cluster} cluster
 */
export function testDatabaseEnvironment(cluster) {
  return {
    TEST_DATABASE_ADMIN_URL: databaseUrl(cluster, 'owner', 'postgres'),
    TEST_APP_ROLE_PASSWORD: cluster.passwords.app,
  }
}
