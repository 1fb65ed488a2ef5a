'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import type { Problem } from '@/components/ui/problem'
import { tryApi } from '@/lib/http/api-client'
import type { RecipeVersionDto } from '@/lib/recipes/schema'

/** Starts a draft from the recipe's approved version and opens its bench. */
export function NewVersionButton({ recipeId, label }: { recipeId: string; label: string }) {
  const router = useRouter()
  const [problem, setProblem] = useState<Problem | null>(null)
  const [isBusy, setIsBusy] = useState(false)

  async function start() {
    setIsBusy(true)
    const answer = await tryApi<RecipeVersionDto>('POST', '/api/recipes/{id}/versions', {
      params: { id: recipeId },
      body: {},
    })
    setIsBusy(false)
    setProblem(answer.problem)
    if (answer.data !== null) router.push(`/recipe-versions/${answer.data.id}`)
  }

  return (
    <div>
      <Button kind="main" onClick={start} isBusy={isBusy}>
        {label}
      </Button>
      <FormError problem={problem} />
    </div>
  )
}
