'use client'

import { useState } from 'react'
import { Button } from '@/components/ui/button'
import { Checkbox } from '@/components/ui/checkbox'
import { ConfirmDialog } from '@/components/ui/confirm-dialog'
import { FormError } from '@/components/ui/form-error'
import { NumberField } from '@/components/ui/number-field'
import type { Problem } from '@/components/ui/problem'
import { SelectField } from '@/components/ui/select-field'
import { SignDialog } from '@/components/ui/sign-dialog'
import { TemperatureField } from '@/components/ui/temperature-field'
import { TextArea } from '@/components/ui/text-area'
import { TextField } from '@/components/ui/text-field'
import { useToast } from '@/components/ui/toast'
import type { TemperatureUnit } from '@/lib/format'

const problem: Problem = {
  title: 'Something needs mending',
  detail: 'Two fields need another look; nothing you typed is lost.',
  fields: {
    name: 'Another recipe has this name. Choose one that tells them apart.',
    minutes: 'Write minutes from 1 to 90.',
  },
}

/** Fields in every state, buttons of every kind, and the three dialogs. */
export function ControlSpecimen() {
  const [open, setOpen] = useState<'confirm' | 'sign' | null>(null)
  const [unit, setUnit] = useState<TemperatureUnit>('C')
  const [tempC, setTempC] = useState<number | null>(184)
  const [bandC, setBandC] = useState<number | null>(7)
  const showToast = useToast()
  const [shown, setShown] = useState<Problem | null>(null)
  const close = () => setOpen(null)
  return (
    <div className="grid grid-cols-[repeat(auto-fit,minmax(20rem,1fr))] gap-x-9 gap-y-6">
      <form
        method="post"
        className="space-y-3"
        noValidate
        onSubmit={(event) => {
          event.preventDefault()
          setShown({ ...problem })
        }}
      >
        <FormError problem={shown} labels={{ name: 'Name', minutes: 'Minutes' }} />
        <TextField
          name="name"
          label="Name"
          defaultValue="Quay medium"
          error={shown?.fields?.name}
          hint="As the room will call it."
        />
        <NumberField
          name="minutes"
          label="Minutes"
          unit="min"
          defaultValue={120}
          min={1}
          max={90}
          step={1}
          what="minutes"
          error={shown?.fields?.minutes}
        />
        <SelectField
          name="kind"
          label="Kind"
          placeholder="Choose a kind"
          options={[
            { value: 'ramp', label: 'Ramp' },
            { value: 'hold', label: 'Hold' },
          ]}
        />
        <Button type="submit" kind="due">
          Save with two faults
        </Button>
      </form>
      <form method="post" className="space-y-3" onSubmit={(event) => event.preventDefault()}>
        <SelectField
          name="unit"
          label="My unit"
          value={unit}
          onChange={(event) => setUnit(event.target.value === 'F' ? 'F' : 'C')}
          options={[
            { value: 'C', label: '°C' },
            { value: 'F', label: '°F' },
          ]}
        />
        <TemperatureField
          name="target"
          label="Wood target"
          personUnit={unit}
          valueC={tempC}
          onValueChangeC={setTempC}
          minC={20}
          maxC={260}
        />
        <TemperatureField
          name="band"
          label="Band, plus and minus"
          personUnit={unit}
          kind="difference"
          valueC={bandC}
          onValueChangeC={setBandC}
          minC={1}
          maxC={50}
        />
        <p className="text-soft">
          Held as {tempC === null ? 'nothing' : `${tempC.toFixed(2)} °C`} and{' '}
          {bandC === null ? 'nothing' : `${bandC.toFixed(2)} °C`}.
        </p>
        <Checkbox
          name="lid"
          label="Lid on in this stage"
          hint="The fireside will say so a minute before."
          defaultChecked
        />
      </form>
      <div className="space-y-3">
        <TextArea
          name="intent"
          label="Flavour intent"
          isOptional
          rows={3}
          defaultValue="A little deeper, same dose; more toasted bread than smoke."
        />
        <TextField
          name="off"
          label="Serial"
          defaultValue="SML-0427-P"
          disabled
          hint="Given when the rose is raised."
        />
        <div className="flex flex-wrap gap-2">
          <Button>Compare</Button>
          <Button kind="main">Release</Button>
          <Button kind="due">Release</Button>
          <Button kind="danger" onClick={() => setOpen('confirm')}>
            Withdraw
          </Button>
          <Button kind="due" isBusy>
            Saving
          </Button>
          <Button disabled>Not yet</Button>
          <Button kind="quiet">Take it</Button>
        </div>
        <div className="flex flex-wrap gap-2">
          <Button kind="main" onClick={() => setOpen('sign')}>
            Approve
          </Button>
          <Button
            onClick={() =>
              showToast({ words: 'Feed marked at 26:40.', onUndo: () => showToast({ words: 'Taken back.' }) })
            }
          >
            Mark feed
          </Button>
        </div>
      </div>
      <ConfirmDialog
        isOpen={open === 'confirm'}
        onClose={close}
        title="Withdraw version 4?"
        confirmLabel="Withdraw"
        isDanger
        reasonLabel="Why"
        onConfirm={async () => {
          close()
          return null
        }}
      >
        <p>
          Nobody can start a firing with it any more. Firings under way go on. This cannot be undone; a new
          version can be written from it.
        </p>
      </ConfirmDialog>
      <SignDialog
        isOpen={open === 'sign'}
        onClose={close}
        title="Approve Quay medium, version 5"
        signerName="I. Marr, master cooper"
        meaning="I have checked this version and approve it for firing."
        signLabel="Sign and approve"
        onSign={async () => ({
          title: 'Not signed',
          detail: 'The password does not fit this account.',
          fields: { password: 'Write your own password; three tries are left.' },
        })}
      />
    </div>
  )
}
