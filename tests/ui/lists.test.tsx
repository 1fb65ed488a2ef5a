import { cleanup, render, screen } from '@testing-library/react'
import fc from 'fast-check'
import { afterEach, describe, expect, test } from 'vitest'
import { DeskShell } from '@/components/shell/desk-shell'
import { EmptyState } from '@/components/ui/empty-state'
import { Pager } from '@/components/ui/pager'
import { StaveGauge } from '@/components/ui/stave-gauge'
import { Table } from '@/components/ui/table'
import { changeQuery, readSort, writeSort } from '@/components/ui/url-query'
import { VerdictText } from '@/components/ui/verdict-text'

afterEach(cleanup)

const columns = [
  {
    key: 'serial',
    head: 'Barrel',
    sortKey: 'serial',
    isRowHead: true,
    cell: (row: { serial: string; dose: number }) => row.serial,
  },
  {
    key: 'dose',
    head: 'Dose',
    unit: 'min',
    isNumeric: true,
    sortKey: 'dose',
    cell: (row: { serial: string; dose: number }) => row.dose,
  },
]
const query = { search: 'quay', state: ['finished', 'abandoned'], cursor: 'abc', sort: '-dose' }

describe('a table', () => {
  test('sorts by links that keep search and filters and go back to the first page', () => {
    render(
      <Table
        caption="Firings"
        columns={columns}
        rows={[{ serial: 'SML-0427-P', dose: 15.2 }]}
        rowKey={(row) => row.serial}
        sort={readSort(query.sort, { key: 'serial', direction: 'asc' })}
        sortHref={(sort) => changeQuery('/firings', query, { sort: writeSort(sort) })}
      />,
    )
    const dose = screen.getByRole('columnheader', { name: /Dose/ })
    expect(dose.getAttribute('aria-sort')).toBe('descending')
    expect(dose.querySelector('a')?.getAttribute('href')).toBe(
      '/firings?search=quay&state=finished&state=abandoned&sort=dose',
    )
    const serial = screen.getByRole('columnheader', { name: 'Barrel' })
    expect(serial.getAttribute('aria-sort')).toBeNull()
    expect(serial.querySelector('a')?.getAttribute('href')).toContain('sort=serial')
    expect(screen.getByRole('rowheader').textContent).toBe('SML-0427-P')
  })

  test('without rows says what to do in its place', () => {
    render(
      <Table
        caption="Firings"
        columns={columns}
        rows={[]}
        rowKey={(row) => row.serial}
        empty={<EmptyState title="No firings yet">Start one at a hearth.</EmptyState>}
      />,
    )
    expect(screen.queryByRole('table')).toBeNull()
    expect(screen.getByText('Start one at a hearth.')).toBeTruthy()
  })
})

test('a sort written to the URL is read back', () => {
  fc.assert(
    fc.property(
      fc.constantFrom('asc' as const, 'desc' as const),
      fc.stringMatching(/^[a-z]{1,12}$/),
      (direction, key) => {
        expect(readSort(writeSort({ key, direction }), { key: 'other', direction: 'asc' })).toEqual({
          key,
          direction,
        })
      },
    ),
    { seed: 1, numRuns: 200 },
  )
})

test('an address keeps what was not changed and drops what was taken away', () => {
  expect(changeQuery('/firings', query, { cursor: 'def' })).toBe(
    '/firings?search=quay&state=finished&state=abandoned&sort=-dose&cursor=def',
  )
  expect(changeQuery('/firings', query, { search: null })).toBe(
    '/firings?state=finished&state=abandoned&sort=-dose',
  )
  expect(changeQuery('/firings', {}, {})).toBe('/firings')
})

test('a list that fits on one page has no pager', () => {
  const { container } = render(<Pager />)
  expect(container.textContent).toBe('')
})

test('the current part of the app is named to everyone, and main can be skipped to', () => {
  render(
    <DeskShell
      items={[
        { href: '/room', label: 'Room', isCurrent: false },
        { href: '/firings', label: 'Firings', isCurrent: true },
      ]}
      person={{ name: 'I. Marr', roleName: 'master cooper', accountHref: '/account' }}
    >
      <h1>Firings</h1>
    </DeskShell>,
  )
  expect(screen.getByRole('link', { current: 'page' }).textContent).toBe('Firings')
  expect(screen.getByText('Skip to content').getAttribute('href')).toBe('#main')
  expect(document.getElementById('main')?.textContent).toBe('Firings')
})

describe('words for what is so', () => {
  test('a verdict is always a word; only what is abnormal has a colour', () => {
    const { container, rerender } = render(<VerdictText verdict="in tolerance" />)
    expect(container.textContent).toBe('In tolerance')
    expect(container.innerHTML).not.toMatch(/text-(amber|red)/)
    rerender(<VerdictText verdict="cannot tell" />)
    expect(container.innerHTML).toContain('text-amber')
    rerender(<VerdictText verdict="limit broken" />)
    expect(container.innerHTML).toContain('text-red')
  })

  test('the dose gauge says its figure, its range and the plan', () => {
    render(
      <StaveGauge
        fraction={0.36}
        range={{ low: 0.32, high: 0.4 }}
        planFraction={0.31}
        toleranceLog10={0.12}
      />,
    )
    expect(screen.getByRole('img').getAttribute('aria-label')?.replaceAll('\u00a0', ' ')).toBe(
      'Dose 36 % of target, from 32 % to 40 %; the plan has 31 % at this moment',
    )
  })

  test('the dose gauge of an unknown dose is empty and says so', () => {
    const { container } = render(<StaveGauge fraction={null} toleranceLog10={0.12} />)
    expect(screen.getByRole('img').getAttribute('aria-label')).toBe('Dose not known')
    expect(container.querySelector('.fill-toast')?.getAttribute('width')).toBe('0')
  })
})
