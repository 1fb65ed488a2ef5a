import type { EntityManager } from '@mikro-orm/postgresql'
import { MikroORM } from '@mikro-orm/postgresql'
import { entities } from '@/entities/all'
import { env } from '@/lib/env'
import { shared } from '@/lib/runtime'

type Held = { orm: Promise<MikroORM> | null }

function held(): Held {
  return shared('orm', () => ({ orm: null }))
}

/** Opens the ORM with the application role; it connects when first used. */
async function openOrm(): Promise<MikroORM> {
  return MikroORM.init({
    clientUrl: env().DATABASE_URL,
    entities,
    connect: false,
    forceUtcTimezone: true,
    ignoreUndefinedInQuery: false,
    pool: { min: 0, max: 12, acquireTimeoutMillis: 5_000 },
    driverOptions: { connection: { connectionTimeoutMillis: 5_000 } },
  })
}

export async function getOrm(): Promise<MikroORM> {
  const holder = held()
  holder.orm ??= openOrm()
  return holder.orm
}

/** A fresh entity manager, with an identity map of its own. */
export async function forkEm(): Promise<EntityManager> {
  return (await getOrm()).em.fork()
}

/** Runs `work` in one transaction; whatever it throws undoes everything it wrote. */
export async function inTransaction<T>(work: (em: EntityManager) => Promise<T>): Promise<T> {
  const em = await forkEm()
  return em.transactional(work)
}

/** Rows of one SQL statement; `?` stands for each parameter. */
export async function queryRows<Row>(
  em: EntityManager,
  sql: string,
  parameters: readonly unknown[] = [],
): Promise<Row[]> {
  return em.getConnection().execute<Row[]>(sql, [...parameters], 'all', em.getTransactionContext())
}

export async function closeOrm(): Promise<void> {
  const holder = held()
  const orm = holder.orm
  holder.orm = null
  if (orm !== null) await (await orm).close(true)
}
