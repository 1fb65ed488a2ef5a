import { DeskShell } from '@/components/shell/desk-shell'
import { BenchSpecimen } from '@/components/specimens/bench-specimen'
import { ControlSpecimen } from '@/components/specimens/control-specimen'
import { FiresideSpecimen } from '@/components/specimens/fireside-specimen'
import { FiringSpecimen } from '@/components/specimens/firing-specimen'
import { MediumSpecimen } from '@/components/specimens/medium-specimen'
import { Section } from '@/components/specimens/section'
import { SmallSpecimen } from '@/components/specimens/small-specimen'
import { TableSpecimen } from '@/components/specimens/table-specimen'
import { ToastProvider } from '@/components/ui/toast'
import type { Query } from '@/components/ui/url-query'

const items = ['Room', 'Recipes', 'Firings', 'Batches', 'Barrels', 'Wood', 'Probes']

/** The whole of the specimens page. */
export function AllSpecimens({ query }: { query: Query }) {
  return (
    <ToastProvider>
      <DeskShell
        items={items.map((label) => ({ href: `#${label}`, label, isCurrent: label === 'Firings' }))}
        person={{ name: 'I. Marr', roleName: 'master cooper', accountHref: '#account' }}
        find={<a href="#find">Find a barrel, batch or lot</a>}
      >
        <FiringSpecimen />
        <div className="-mx-7 mt-12">
          <Section title="Bench: drag the plan">
            <BenchSpecimen />
          </Section>
          <Section title="Fireside" isFireside>
            <div className="-mx-7 space-y-6">
              <FiresideSpecimen isAlarm={false} />
              <FiresideSpecimen isAlarm />
            </div>
          </Section>
          <Section title="Small pairs">
            <SmallSpecimen />
          </Section>
          <Section title="Medium pairs">
            <MediumSpecimen />
          </Section>
          <Section title="Fields, buttons, dialogs">
            <ControlSpecimen />
          </Section>
          <Section title="Fields, buttons, dialogs at the fireside" isFireside>
            <ControlSpecimen />
          </Section>
          <Section title="Tables and words">
            <TableSpecimen query={query} />
          </Section>
        </div>
      </DeskShell>
    </ToastProvider>
  )
}
