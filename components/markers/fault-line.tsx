import type { CheckedFormula } from '@/lib/markers/schema'

type Fault = Extract<CheckedFormula, { ok: false }>['fault']

/** The formula with the faulty part underlined, so that the eye finds it; the sentence stands under the field. */
export function FaultLine({ formula, fault }: { formula: string; fault: Fault }) {
  const end = fault.index + fault.length
  return (
    <p className="mt-2 font-mono text-small break-words whitespace-pre-wrap" aria-hidden="true">
      {formula.slice(0, fault.index)}
      <mark className="bg-transparent text-red underline decoration-red decoration-2 underline-offset-4">
        {formula.slice(fault.index, end) || ' '}
      </mark>
      {formula.slice(end)}
    </p>
  )
}
