import { Time } from '@/components/ui/time'
import type { RecipeVersionDto } from '@/lib/recipes/schema'

/** What happened to a version, in the order it happened: who, when, why. */
export function VersionHistory({ version, zone }: { version: RecipeVersionDto; zone: string }) {
  const acts = [
    { at: version.createdAt, words: `Begun by ${version.author.name}` },
    { at: version.sentAt, words: 'Sent for review' },
    {
      at: version.returnedAt,
      words: `Returned by ${version.returnedBy ?? 'a master cooper'}: ${version.returnReason ?? ''}`,
    },
    ...version.signatures.map((signature) => ({
      at: signature.signedAt,
      words: `Signed by ${signature.name}, ${signature.role}: “${signature.meaning}”${signature.reason === null ? '' : ` ${signature.reason}`}`,
    })),
    { at: version.supersededAt, words: 'Superseded by a newer version' },
  ]
  const happened = acts
    .flatMap(({ at, words }) => (at === null ? [] : [{ at, words }]))
    .sort((a, b) => a.at.localeCompare(b.at))
  return (
    <section aria-label="What happened to it">
      <h2 className="mb-1 font-[640]">What happened to it</h2>
      <ol>
        {happened.map((act) => (
          <li key={`${act.at} ${act.words}`} className="grid grid-cols-[11rem_1fr] gap-x-2">
            <span className="text-soft">
              <Time at={act.at} zone={zone} />
            </span>
            <span>{act.words}</span>
          </li>
        ))}
      </ol>
    </section>
  )
}
