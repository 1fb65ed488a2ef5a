'use client'

import { Button } from '@/components/ui/button'
import { Dialog } from '@/components/ui/dialog'
import type { ContentDifference } from '@/lib/recipes/content-differences'

/** Somebody saved meanwhile: what the two say differently, and the choice. Nothing is lost before it is made. */
export function StaleDialog({
  differences,
  isBusy,
  onKeepMine,
  onTakeTheirs,
  onClose,
}: {
  differences: readonly ContentDifference[] | null
  isBusy: boolean
  onKeepMine: () => void
  onTakeTheirs: () => void
  onClose: () => void
}) {
  if (differences === null) return null
  return (
    <Dialog
      isOpen
      onClose={onClose}
      title="Somebody saved this version meanwhile"
      isBusy={isBusy}
      actions={
        <>
          <Button onClick={onClose}>Decide later</Button>
          <Button onClick={onTakeTheirs}>Take theirs</Button>
          <Button kind="due" onClick={onKeepMine} isBusy={isBusy}>
            Keep mine
          </Button>
        </>
      }
    >
      {differences.length === 0 ? (
        <p>Both say the same. Either choice goes on from there.</p>
      ) : (
        <table className="w-full border-collapse">
          <caption className="mb-2 text-left">
            Keep mine writes over theirs. Taking theirs can be undone here.
          </caption>
          <thead>
            <tr className="border-b border-line text-left text-small text-soft">
              <th scope="col" className="py-1 pr-4 font-normal">
                What
              </th>
              <th scope="col" className="py-1 pr-4 font-normal">
                Mine
              </th>
              <th scope="col" className="py-1 font-normal">
                Theirs
              </th>
            </tr>
          </thead>
          <tbody>
            {differences.map((line) => (
              <tr key={line.name} className="border-b border-line align-top">
                <th scope="row" className="py-1 pr-4 text-left font-normal text-soft">
                  {line.name}
                </th>
                <td className="py-1 pr-4">{line.before}</td>
                <td className="py-1">{line.after}</td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
    </Dialog>
  )
}
