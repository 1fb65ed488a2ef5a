'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import { CopyDialog } from '@/components/probes/copy-dialog'
import { Button } from '@/components/ui/button'
import { ConfirmDialog } from '@/components/ui/confirm-dialog'
import { FormDialog } from '@/components/ui/form-dialog'
import type { SelectOption } from '@/components/ui/select-field'
import { Time } from '@/components/ui/time'
import type { DeviceCodeDto, DeviceDto } from '@/lib/devices/schema'
import { tryApi } from '@/lib/http/api-client'
import { deviceFields } from './device-words'

/** Makes a device, and shows its code this once. */
export function NewDevice({ hearths, zone }: { hearths: readonly SelectOption[]; zone: string }) {
  const [made, setMade] = useState<DeviceCodeDto | null>(null)
  return (
    <>
      <FormDialog
        openLabel="Add a device"
        openKind="main"
        title="Add a tablet or wall screen"
        submitLabel="Make its code"
        method="POST"
        path="/api/devices"
        fields={deviceFields(hearths)}
        onAnswer={(answer) => setMade(asCode(answer))}
      >
        <p>You get a code to type at the device. Until then it can do nothing.</p>
      </FormDialog>
      <CodeDialog made={made} zone={zone} onClose={() => setMade(null)} />
    </>
  )
}

/** The parsed boundary: the answer of our own route, of the same build. */
function asCode(answer: unknown): DeviceCodeDto {
  return answer as DeviceCodeDto
}

/** A new code for a device that waits, or whose tablet is replaced. */
export function NewCodeButton({ device, zone }: { device: DeviceDto; zone: string }) {
  const router = useRouter()
  const [isAsking, setIsAsking] = useState(false)
  const [made, setMade] = useState<DeviceCodeDto | null>(null)

  async function make() {
    const { data, problem } = await tryApi<DeviceCodeDto>('POST', '/api/devices/{id}/codes', {
      params: { id: device.id },
    })
    if (problem !== null) return problem
    setIsAsking(false)
    setMade(data)
    return null
  }

  return (
    <>
      <Button kind="quiet" onClick={() => setIsAsking(true)}>
        New code<span className="sr-only"> for {device.name}</span>
      </Button>
      <ConfirmDialog
        isOpen={isAsking}
        onClose={() => setIsAsking(false)}
        title={`New code for ${device.name}?`}
        confirmLabel="Make the code"
        onConfirm={make}
      >
        {device.state === 'enrolled'
          ? 'The tablet that is there now serves until the code is typed at another; then it is out.'
          : 'A code that was made before ends.'}
      </ConfirmDialog>
      <CodeDialog
        made={made}
        zone={zone}
        onClose={() => {
          setMade(null)
          router.refresh()
        }}
      />
    </>
  )
}

function CodeDialog({
  made,
  zone,
  onClose,
}: {
  made: DeviceCodeDto | null
  zone: string
  onClose: () => void
}) {
  if (made === null) return null
  return (
    <CopyDialog
      title={`The code of ${made.device.name}`}
      label="Code"
      secret={made.code}
      isLarge
      onClose={onClose}
    >
      <p>
        On the device open <EnrolAddress /> and type it, until <Time at={made.expiresAt} zone={zone} />. It is
        typed once and not shown again.
      </p>
    </CopyDialog>
  )
}

/** Where the code is typed, as this browser reaches the server. */
function EnrolAddress() {
  return <span className="font-mono">{window.location.origin}/enrol</span>
}
