import type { ReactNode } from 'react'

/** Names and what they are, a line each: the quiet table of a thing's particulars. */
export function Facts({
  facts,
  isRuled = false,
}: {
  facts: readonly { name: string; value: ReactNode }[]
  isRuled?: boolean
}) {
  return (
    <dl className="grid grid-cols-[fit-content(45%)_1fr]">
      {facts.map((fact) => (
        <div
          key={fact.name}
          className={`col-span-2 grid grid-cols-subgrid gap-x-5 ${isRuled ? 'border-b border-line py-[5.5px]' : 'py-[1.5px]'}`}
        >
          <dt className={isRuled ? '' : 'text-soft'}>{fact.name}</dt>
          <dd className="min-w-0">{fact.value}</dd>
        </div>
      ))}
    </dl>
  )
}
