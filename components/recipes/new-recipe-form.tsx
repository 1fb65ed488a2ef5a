'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import type { FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import { LinkButton } from '@/components/ui/link-button'
import type { Problem } from '@/components/ui/problem'
import type { SelectOption } from '@/components/ui/select-field'
import { SelectField } from '@/components/ui/select-field'
import { TextArea } from '@/components/ui/text-area'
import { TextField } from '@/components/ui/text-field'
import { tryApi } from '@/lib/http/api-client'
import type { RecipeDto } from '@/lib/recipes/schema'
import { pieceKinds } from '@/lib/recipes/schema'
import { startingContent, usualToasts } from '@/lib/recipes/starting-content'
import type { SiteRules } from '@/lib/science/site-rules'

const labels = { name: 'Name', customerId: 'Customer', 'content.flavourIntent': 'Flavour intent' }

/** Name, customer and a usual toast to begin from; the rest is written on the bench. */
export function NewRecipeForm({
  customers,
  rules,
}: {
  customers: readonly SelectOption[]
  rules: Pick<SiteRules, 'doseToleranceLog10' | 'bendMin'>
}) {
  const router = useRouter()
  const [values, setValues] = useState({
    name: '',
    customerId: '',
    toast: 'medium',
    pieceKind: 'barrel',
    flavourIntent: '',
  })
  const [problem, setProblem] = useState<Problem | null>(null)
  const [isBusy, setIsBusy] = useState(false)
  const set = (changes: Partial<typeof values>) => setValues((now) => ({ ...now, ...changes }))

  async function submit(event: FormEvent) {
    event.preventDefault()
    const toast = usualToasts.find((one) => one === values.toast) ?? 'medium'
    const pieceKind = pieceKinds.find((one) => one === values.pieceKind) ?? 'barrel'
    setIsBusy(true)
    const answer = await tryApi<RecipeDto>('POST', '/api/recipes', {
      body: {
        name: values.name,
        customerId: values.customerId === '' ? null : values.customerId,
        content: { ...startingContent(toast, pieceKind, rules), flavourIntent: values.flavourIntent },
      },
    })
    setIsBusy(false)
    setProblem(answer.problem)
    if (answer.data !== null) router.push(`/recipe-versions/${answer.data.latestVersion.id}`)
  }

  return (
    <form method="post" onSubmit={submit} noValidate className="max-w-[34rem] space-y-4">
      <FormError problem={problem} labels={labels} />
      <TextField
        name="name"
        label="Name"
        hint="As the room will say it: “Quay medium”."
        required
        maxLength={80}
        value={values.name}
        error={problem?.fields?.['name']}
        onChange={(event) => set({ name: event.target.value })}
      />
      <SelectField
        name="customerId"
        label="Customer"
        isOptional
        hint="Whose house style it is. Leave it open for a recipe of your own."
        options={customers}
        placeholder="For everybody"
        value={values.customerId}
        error={problem?.fields?.['customerId']}
        onChange={(event) => set({ customerId: event.target.value })}
      />
      <SelectField
        name="pieceKind"
        label="Piece"
        options={pieceKinds.map((kind) => ({ value: kind, label: kind }))}
        value={values.pieceKind}
        onChange={(event) => set({ pieceKind: event.target.value })}
      />
      <SelectField
        name="toast"
        label="Begin from"
        hint="A usual toast (common practice; sources differ). Everything can be changed on the bench."
        options={usualToasts.map((toast) => ({ value: toast, label: `a ${toast} toast` }))}
        value={values.toast}
        onChange={(event) => set({ toast: event.target.value })}
      />
      <TextArea
        name="content.flavourIntent"
        label="Flavour intent"
        isOptional
        rows={2}
        maxLength={2000}
        value={values.flavourIntent}
        error={problem?.fields?.['content.flavourIntent']}
        onChange={(event) => set({ flavourIntent: event.target.value })}
      />
      <div className="flex flex-wrap gap-2">
        <Button type="submit" kind="due" isBusy={isBusy}>
          Make it and open the bench
        </Button>
        <LinkButton href="/recipes">Cancel</LinkButton>
      </div>
    </form>
  )
}
