import { forkEm, queryRows } from '@/lib/db/orm'
import { removeFile } from '@/lib/files/file-store'
import { now } from '@/lib/runtime'

const atATime = 50

/** Takes files away that nothing points to. A storage that does not answer has logged it; nothing more can be done. */
export async function removeQuietly(keys: readonly string[]): Promise<boolean> {
  const removed = await Promise.all(
    keys.map((key) =>
      removeFile(key).then(
        () => true,
        () => false,
      ),
    ),
  )
  return removed.every(Boolean)
}

/**
 * Erases the pictures of photos that were removed. One whose storage did not answer stays marked, and is tried again
 * with the next; nobody is shown it meanwhile. Answers how many were erased.
 */
export async function eraseRemovedPhotos(): Promise<number> {
  const em = await forkEm()
  const rows = await queryRows<{ id: string; file_key: string; thumbnail_key: string }>(
    em,
    `select id, file_key, thumbnail_key from firing_photos
      where removed_at is not null and erased_at is null order by removed_at limit ?`,
    [atATime],
  )
  let erased = 0
  for (const row of rows) {
    if (!(await removeQuietly([row.file_key, row.thumbnail_key]))) continue
    await queryRows(em, 'update firing_photos set erased_at = ? where id = ? and erased_at is null', [
      now(),
      row.id,
    ])
    erased += 1
  }
  return erased
}
