import { cleanup, fireEvent, render, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { useState } from 'react'
import { afterEach, describe, expect, test } from 'vitest'
import { Button } from '@/components/ui/button'
import { Checkbox } from '@/components/ui/checkbox'
import { FormError } from '@/components/ui/form-error'
import { NumberField } from '@/components/ui/number-field'
import { SelectField } from '@/components/ui/select-field'
import { TemperatureField } from '@/components/ui/temperature-field'
import { TextArea } from '@/components/ui/text-area'
import { TextField } from '@/components/ui/text-field'
import type { TemperatureUnit } from '@/lib/format'

afterEach(cleanup)

/** What a screen reader says of a field after its name. */
function describedBy(element: HTMLElement): string {
  const ids = element.getAttribute('aria-describedby')?.split(' ') ?? []
  return ids.map((id) => document.getElementById(id)?.textContent ?? 'missing').join(' | ')
}

describe('every field', () => {
  test('is found by its label', () => {
    render(
      <>
        <TextField name="name" label="Name" />
        <NumberField name="minutes" label="Minutes" />
        <TextArea name="intent" label="Flavour intent" isOptional />
        <SelectField name="kind" label="Kind" options={[{ value: 'ramp', label: 'Ramp' }]} />
        <Checkbox name="lid" label="Lid on" />
        <TextField name="stages.0.name" label="Stage name" isLabelHidden />
      </>,
    )
    for (const label of ['Name', 'Minutes', /Flavour intent/, 'Kind', 'Lid on', 'Stage name'])
      expect(screen.getByLabelText(label)).toBeTruthy()
  })

  test('says its unit, its hint and its error, in this order, and that it is wrong', () => {
    render(
      <TextField
        name="water"
        label="Water"
        unit="°C"
        hint="From the tap."
        error="Write a temperature from 5 to 95."
      />,
    )
    const field = screen.getByLabelText('Water')
    expect(describedBy(field)).toBe('°C | From the tap. | Write a temperature from 5 to 95.')
    expect(field.getAttribute('aria-invalid')).toBe('true')
  })

  test('keeps what was typed when its error appears', async () => {
    const { rerender } = render(<TextField name="name" label="Name" defaultValue="" />)
    await userEvent.type(screen.getByLabelText('Name'), 'Quay medium')
    rerender(<TextField name="name" label="Name" defaultValue="" error="Another recipe has this name." />)
    expect(screen.getByLabelText<HTMLInputElement>('Name').value).toBe('Quay medium')
  })
})

describe('a number field', () => {
  function Minutes({ onValue = () => undefined, initial = null as number | null }) {
    const [value, setValue] = useState<number | null>(initial)
    return (
      <>
        <NumberField
          name="minutes"
          label="Minutes"
          min={1}
          max={90}
          step={1}
          what="minutes"
          value={value}
          onValueChange={(next) => {
            setValue(next)
            onValue()
          }}
        />
        <output>{String(value)}</output>
        <button type="button" onClick={() => setValue(26.2)}>
          Undo
        </button>
      </>
    )
  }
  const field = () => screen.getByLabelText<HTMLInputElement>('Minutes')

  test('takes a decimal comma and leaves it as typed', async () => {
    render(<Minutes />)
    await userEvent.type(field(), '12,50')
    expect(field().value).toBe('12,50')
    expect(screen.getByRole('status').textContent).toBe('12.5')
  })

  test('keeps text that is no number, and says the fix once it is left', async () => {
    render(<Minutes />)
    await userEvent.type(field(), 'about 12')
    expect(describedBy(field())).toBe('')
    await userEvent.tab()
    expect(field().value).toBe('about 12')
    expect(screen.getByRole('status').textContent).toBe('null')
    expect(describedBy(field())).toBe('Write minutes from 1 to 90, in figures only.')
  })

  test('says its bounds when they are passed', async () => {
    render(<Minutes />)
    await userEvent.type(field(), '120')
    await userEvent.tab()
    expect(describedBy(field())).toBe('Write minutes from 1 to 90.')
  })

  test('shows a number that comes from outside', async () => {
    render(<Minutes initial={12} />)
    await userEvent.click(screen.getByText('Undo'))
    expect(field().value).toBe('26.2')
  })

  test('steps by the arrow keys, never past its bounds', async () => {
    render(<Minutes initial={89} />)
    await userEvent.type(field(), '{ArrowUp}{ArrowUp}{ArrowUp}')
    expect(field().value).toBe('90')
    await userEvent.type(field(), '{ArrowDown}')
    expect(field().value).toBe('89')
  })
})

describe('a temperature field', () => {
  function Target({ kind = 'temperature' as 'temperature' | 'difference' | 'rate', initialC = 0 }) {
    const [unit, setUnit] = useState<TemperatureUnit>('F')
    const [valueC, setValueC] = useState<number | null>(initialC)
    return (
      <>
        <TemperatureField
          name="t"
          label="Target"
          personUnit={unit}
          kind={kind}
          valueC={valueC}
          onValueChangeC={setValueC}
          minC={0}
          maxC={100}
        />
        <output>{valueC === null ? 'none' : valueC.toFixed(3)}</output>
        <button type="button" onClick={() => setUnit((now) => (now === 'F' ? 'C' : 'F'))}>
          Change unit
        </button>
      </>
    )
  }
  const field = () => screen.getByLabelText<HTMLInputElement>('Target')

  test('shows °F and holds °C', async () => {
    render(<Target initialC={100} />)
    expect(field().value).toBe('212')
    await userEvent.clear(field())
    await userEvent.type(field(), '50')
    expect(screen.getByRole('status').textContent).toBe('10.000')
    expect(describedBy(field())).toBe('°F')
  })

  test('converts a difference as a difference, and a rate a minute likewise', async () => {
    render(<Target kind="difference" initialC={7} />)
    expect(field().value).toBe('12.6')
    cleanup()
    render(<Target kind="rate" initialC={10} />)
    expect(field().value).toBe('18')
    expect(describedBy(field())).toBe('°F a minute')
  })

  test('names its bounds in the person’s unit', async () => {
    render(<Target initialC={50} />)
    await userEvent.clear(field())
    await userEvent.type(field(), '300')
    await userEvent.tab()
    expect(describedBy(field())).toContain('Write a temperature in °F from 32 to 212.')
  })

  test('a change of unit moves no temperature', async () => {
    render(<Target initialC={37} />)
    expect(field().value).toBe('98.6')
    await userEvent.click(screen.getByText('Change unit'))
    expect(field().value).toBe('37')
    expect(screen.getByRole('status').textContent).toBe('37.000')
  })
})

describe('the summary of a refused form', () => {
  const problem = {
    title: 'Something needs mending',
    detail: 'One field needs another look.',
    fields: { 'stages.0.minutes': 'Write minutes from 1 to 90.' },
  }

  test('takes the focus, and each line leads to its field', async () => {
    render(
      <>
        <FormError problem={problem} labels={{ 'stages.0.minutes': 'Warm, minutes' }} />
        <TextField name="stages.0.minutes" label="Minutes" error={problem.fields['stages.0.minutes']} />
      </>,
    )
    expect(document.activeElement).toBe(screen.getByRole('alert'))
    await userEvent.click(screen.getByText('Warm, minutes: Write minutes from 1 to 90.'))
    expect(document.activeElement).toBe(screen.getByLabelText('Minutes'))
  })

  test('is not there when nothing is wrong', () => {
    render(<FormError problem={null} />)
    expect(screen.queryByRole('alert')).toBeNull()
  })
})

describe('a button', () => {
  test('never submits a form by accident', () => {
    render(<Button>Compare</Button>)
    expect(screen.getByRole('button').getAttribute('type')).toBe('button')
  })

  test('takes no second press while it is busy', () => {
    let presses = 0
    render(
      <Button isBusy onClick={() => (presses += 1)}>
        Saving
      </Button>,
    )
    fireEvent.click(screen.getByRole('button'))
    expect(presses).toBe(0)
    expect(screen.getByRole('button').getAttribute('aria-busy')).toBe('true')
  })

  test('a busy submit button submits nothing', () => {
    let submits = 0
    render(
      <form
        onSubmit={(event) => {
          event.preventDefault()
          submits += 1
        }}
      >
        <Button type="submit" isBusy>
          Saving
        </Button>
      </form>,
    )
    fireEvent.click(screen.getByRole('button'))
    expect(submits).toBe(0)
  })
})
