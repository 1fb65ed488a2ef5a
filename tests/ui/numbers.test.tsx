import { cleanup, render, screen, within } from '@testing-library/react'
import { afterEach, expect, it } from 'vitest'
import { NumbersView } from '@/components/numbers/numbers-view'
import { defaultSiteRules } from '@/lib/science/site-rules'

afterEach(cleanup)

function sectionOf(title: RegExp) {
  const section = screen.getByRole('heading', { name: title, level: 2 }).closest('section')
  if (section === null) throw new Error(`${title.source} stands in no section`)
  return within(section)
}

it('every number of the contents has its section, with a worked example or a table', () => {
  render(<NumbersView rules={defaultSiteRules} siteVersion={3} unit="C" />)
  const links = within(screen.getByRole('navigation', { name: 'Numbers' })).getAllByRole('link')
  expect(links.length).toBeGreaterThan(15)
  for (const link of links) {
    const section = document.getElementById((link.getAttribute('href') ?? '').slice(1))
    expect(section?.querySelector('h2')?.textContent, link.textContent ?? '').toBeTruthy()
  }
  expect(screen.queryByText(/NaN|undefined|Infinity/)).toBeNull()
})

it('the dose of published holds is worked with the site’s own constants', () => {
  // SCIENCE §2: 40 min at 185 °C is severity 4.10 and 14.5 min at 200 °C with z 34.
  render(<NumbersView rules={defaultSiteRules} siteVersion={1} unit="C" />)
  const row = within(sectionOf(/^Heat dose$/).getByRole('row', { name: /40 min at 185/ }))
  expect(row.getByText('14.5')).toBeTruthy()
  expect(row.getByText('4.10')).toBeTruthy()
})

it('another z of the site changes constant, words and example together', () => {
  const dose = { ...defaultSiteRules.dose, zC: 20 }
  render(<NumbersView rules={{ ...defaultSiteRules, dose }} siteVersion={2} unit="C" />)
  const section = sectionOf(/^Heat dose$/)
  expect(section.getByRole('row', { name: /^z 20\s°C/ })).toBeTruthy()
  // 40 · 10^(−15/20) = 7.1
  expect(within(section.getByRole('row', { name: /40 min at 185/ })).getByText('7.1')).toBeTruthy()
  expect(section.getByText(/one minute at 220/)).toBeTruthy()
})

it('in °F differences are turned without the 32', () => {
  render(<NumbersView rules={defaultSiteRules} siteVersion={1} unit="F" />)
  const section = sectionOf(/^Heat dose$/)
  expect(section.getByRole('row', { name: /^Reference 392\s°F/ })).toBeTruthy()
  expect(section.getByRole('row', { name: /^z 61\s°F/ })).toBeTruthy()
})
