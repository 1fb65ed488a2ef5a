'use client'

import type { MarkerDesk } from '@/lib/markers/get-marker-desk'

/** Everything that a formula may name; a press puts the name where the cursor stands. */
export function SymbolList({
  symbols,
  functions,
  onTake,
}: Pick<MarkerDesk, 'symbols' | 'functions'> & { onTake: (text: string) => void }) {
  return (
    <section aria-labelledby="formula-names">
      <h2 id="formula-names" className="mb-1">
        What a formula may name
      </h2>
      <p className="mb-2 text-soft">
        Numbers, + - * / ^ and parentheses; nothing else. Press a name to put it in.
      </p>
      <dl className="max-h-[34rem] overflow-y-auto border-t border-line" tabIndex={0} aria-label="Names">
        {symbols.map(({ name, unit, meaning }) => (
          <Line key={name} code={name} onTake={() => onTake(name)}>
            {meaning} <span className="text-soft">({unit})</span>
          </Line>
        ))}
        {functions.map(({ name, form, meaning }) => (
          <Line key={name} code={form} onTake={() => onTake(form)}>
            {meaning}
          </Line>
        ))}
      </dl>
    </section>
  )
}

function Line({ code, onTake, children }: { code: string; onTake: () => void; children: React.ReactNode }) {
  return (
    <div className="grid grid-cols-[13rem_1fr] gap-x-3 border-b border-line py-1">
      <dt>
        <button
          type="button"
          className="min-h-6 text-left font-mono text-water hover:underline"
          onClick={onTake}
        >
          {code}
        </button>
      </dt>
      <dd>{children}</dd>
    </div>
  )
}
