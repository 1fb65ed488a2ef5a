import { Table } from '@/components/ui/table'
import { alarmCatalog, alarmKinds } from '@/lib/alarms/alarm-kinds'

const priorityWords = { 1: 'Now', 2: 'Soon', 3: 'When hands are free', 4: 'Reminder' } as const

/** Why each alarm is there: when it comes, what comes of it, what to do. */
export function AlarmReasons() {
  return (
    <details className="mt-8">
      <summary className="cursor-pointer font-[640]">What each alarm means, and what to do</summary>
      <p className="mt-2 mb-2 text-soft">
        Common practice in the room, from memory; the figures are the recipe’s limits and the site’s rules.
      </p>
      <Table
        caption="The alarms and why they are there"
        rows={alarmKinds.map((kind) => ({ kind, ...alarmCatalog[kind] }))}
        rowKey={(row) => row.kind}
        columns={[
          {
            key: 'name',
            head: 'Alarm',
            isRowHead: true,
            className: 'whitespace-nowrap',
            cell: (row) => row.name,
          },
          { key: 'priority', head: 'Priority', cell: (row) => priorityWords[row.priority] },
          { key: 'when', head: 'Comes when', cell: (row) => row.comesWhen },
          { key: 'consequence', head: 'If nobody does anything', cell: (row) => row.consequence },
          { key: 'do', head: 'What to do', cell: (row) => row.whatToDo },
        ]}
      />
    </details>
  )
}
