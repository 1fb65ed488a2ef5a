import { Pair } from '@/components/chart/pair'
import { Button } from '@/components/ui/button'
import { Facts } from '@/components/ui/facts'
import { LinkButton } from '@/components/ui/link-button'
import { PageHead } from '@/components/ui/page-head'
import { Table } from '@/components/ui/table'
import { sampleFinished } from './sample-firing'

const terms = [
  { term: 'Dose', measured: '+0.04 log', allowed: '±0.12', points: '45 of 45' },
  { term: 'In band', measured: '83 % of 45 min', allowed: '90 %', points: '13 of 15' },
  { term: 'Shape', measured: '1.2 bands', allowed: '1', points: '9 of 10' },
  { term: 'Stage lengths', measured: 'Climb 24 % long', allowed: '10 %', points: '7 of 10' },
  { term: 'Spread', measured: '3.4 °C', allowed: '8 °C', points: '10 of 10' },
  { term: 'Preheat and bend', measured: 'bend 8:10', allowed: '10:00', points: '6 of 10' },
]

const happened = [
  { name: '13:47', value: 'Feed' },
  { name: '13:54', value: 'Stir' },
  { name: '13:58', value: 'Lid off' },
  { name: '14:03', value: 'Bilge A had no reading for 22 s' },
  { name: '14:10', value: 'Feed' },
]

/** The firing page's grammar, with the large pair on the desk's ground. */
export function FiringSpecimen() {
  return (
    <>
      <PageHead
        title="Barrel SML-0427-P"
        sub="Hearth 2, fired by T. Okafor, first of the day, on 14 March, 13:41 to 14:28. Quay medium, version 4. Batch 118, Norlund lot 22-07."
        verdict={
          <>
            <strong>In tolerance</strong> 90 points
          </>
        }
        verdictSub="Dose 15.2 min at 200 °C (13.9 to 16.6), plan 13.8"
        actions={
          <>
            <LinkButton href="#compare">Compare</LinkButton>
            <Button>Draft a recipe</Button>
            <Button kind="due">Release</Button>
          </>
        }
      />
      <div className="grid grid-cols-[minmax(0,1fr)_minmax(22rem,28.5rem)] gap-x-9">
        <Pair {...sampleFinished()} />
        <div className="space-y-6">
          <div>
            <h2 className="mb-1">Why 90 points</h2>
            <Table
              caption="Why 90 points"
              rowKey={(row) => row.term}
              rows={terms}
              columns={[
                { key: 'term', head: 'Term', isRowHead: true, cell: (row) => row.term },
                { key: 'measured', head: 'Measured', cell: (row) => row.measured },
                { key: 'allowed', head: 'Allowed', cell: (row) => row.allowed },
                { key: 'points', head: 'Points', isNumeric: true, cell: (row) => row.points },
              ]}
            />
          </div>
          <div>
            <h2 className="mb-1">What happened</h2>
            <Facts isRuled facts={happened} />
          </div>
        </div>
      </div>
    </>
  )
}
