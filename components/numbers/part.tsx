import type { ReactNode } from 'react'
import { Table } from '@/components/ui/table'

/** One number's section: what it says, its formula, its constants with their sources, and a worked example. */
export function Part({ id, title, children }: { id: string; title: string; children: ReactNode }) {
  return (
    <section id={id} className="scroll-mt-6 border-t border-line pt-4 break-inside-avoid-page">
      <h2 className="mb-2">{title}</h2>
      <div className="max-w-[72ch] space-y-2.5">{children}</div>
    </section>
  )
}

export function Formula({ children }: { children: string }) {
  return <p className="bg-wash px-3 py-1.5 font-mono text-small whitespace-pre-line">{children}</p>
}

/** Worked with the functions that the app itself uses, and this site’s constants. */
export function Worked({ children }: { children: ReactNode }) {
  return (
    <p className="border-l-2 border-edge pl-3">
      <strong>Worked.</strong> {children}
    </p>
  )
}

export type Constant = { name: string; value: string; source: string }

export function Constants({ of, rows }: { of: string; rows: readonly Constant[] }) {
  return (
    <Table
      caption={`Constants: ${of}`}
      rows={rows}
      rowKey={(row) => row.name}
      columns={[
        { key: 'name', head: 'Constant', isRowHead: true, cell: (row) => row.name },
        {
          key: 'value',
          head: 'Value',
          isNumeric: true,
          cell: (row) => row.value,
          className: 'whitespace-nowrap',
        },
        {
          key: 'source',
          head: 'From',
          cell: (row) => <span className="text-soft">{row.source}</span>,
        },
      ]}
    />
  )
}

/** What the number may not be used for. */
export function Limit({ children }: { children: ReactNode }) {
  return <p className="text-soft">{children}</p>
}
