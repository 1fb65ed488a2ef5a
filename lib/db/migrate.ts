import { MikroORM } from '@mikro-orm/postgresql'
import { Migrator } from '@mikro-orm/migrations'
import { pathToFileURL } from 'node:url'
import { migrationsList } from '@/migrations/list'

/** Opens the database as its owner, with the migrator and no entities. */
async function openOwner(ownerUrl: string) {
  return MikroORM.init({
    clientUrl: ownerUrl,
    entities: [],
    extensions: [Migrator],
    discovery: { warnWhenNoEntities: false },
    pool: { min: 0, max: 2 },
    migrations: {
      migrationsList,
      tableName: 'migrations',
      transactional: true,
      snapshot: false,
      silent: true,
    },
  })
}

/** Brings the database up to the last migration (or to the one named). Returns the names that ran. */
export async function migrateUp(ownerUrl: string, to?: string): Promise<string[]> {
  const orm = await openOwner(ownerUrl)
  try {
    const ran = await orm.getMigrator().up(to === undefined ? undefined : { to })
    return ran.map((migration) => migration.name)
  } finally {
    await orm.close(true)
  }
}

/** Takes the database down to (and including undoing) the named migration, or to empty with '0'. */
export async function migrateDown(ownerUrl: string, to: string): Promise<string[]> {
  const orm = await openOwner(ownerUrl)
  try {
    const ran = await orm.getMigrator().down({ to: to === '0' ? 0 : to })
    return ran.map((migration) => migration.name)
  } finally {
    await orm.close(true)
  }
}

const isProgram = process.argv[1] !== undefined && import.meta.url === pathToFileURL(process.argv[1]).href
if (isProgram) {
  const ownerUrl = process.env['DATABASE_OWNER_URL']
  if (ownerUrl === undefined) {
    process.stderr.write('Set DATABASE_OWNER_URL to the address of the database, with the owner role.\n')
    process.exit(1)
  }
  const ran = await migrateUp(ownerUrl)
  process.stdout.write(ran.length === 0 ? 'The schema is up to date.\n' : `Ran ${ran.join(', ')}.\n`)
}
