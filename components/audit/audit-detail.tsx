import type { ReactNode } from 'react'

/** An entry's particulars: what changed from what to what, or plain names and values. */
export function AuditDetail({ detail }: { detail: Readonly<Record<string, unknown>> }) {
  const lines = Object.entries(detail).flatMap(([name, value]) =>
    name === 'changes' && isRecord(value)
      ? Object.entries(value).map(([path, change]) => describeChange(path, change))
      : [`${name}: ${show(value)}`],
  )
  if (lines.length === 0) return null
  return (
    <ul>
      {lines.map((line): ReactNode => (
        <li key={line} className="break-words">
          {line}
        </li>
      ))}
    </ul>
  )
}

function describeChange(path: string, change: unknown): string {
  if (!isRecord(change)) return `${path}: ${show(change)}`
  return `${path}: from ${show(change.from)} to ${show(change.to)}`
}

function show(value: unknown): string {
  if (value === null || value === undefined) return 'none'
  if (typeof value === 'string') return value === '' ? 'empty' : value
  return JSON.stringify(value)
}

function isRecord(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null && !Array.isArray(value)
}
