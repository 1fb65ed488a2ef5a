import type { MarkerResponseDto } from '@/lib/markers/schema'
import type { LeadPlace } from '@/lib/recipes/schema'
import type { AssayUnit } from '@/lib/science/formula-units'
import type { FamilyId } from '@/lib/science/marker-families'

/** The fit panel as it is typed; a number that is none yet is null, and the server says so beside its field. */
export type FitDraft = {
  family: FamilyId
  unit: AssayUnit
  matrix: string
  extraction: string
  samplePosition: string
  sampleFromMm: number | null
  sampleToMm: number | null
  place: Omit<LeadPlace, 'depthMm'> & { depthMm: number | null }
  rows: string
  note: string
}

type StoredFit = Extract<MarkerResponseDto, { kind: 'fit' }>

/** Begins with a stored fit, its rows as they were typed, or with nothing but the usual place. */
export function startDraft(unit: AssayUnit, usualPlace: LeadPlace, start: StoredFit | null): FitDraft {
  if (start === null) {
    return {
      family: 'line in log10 dose',
      unit,
      matrix: '',
      extraction: '',
      samplePosition: '',
      sampleFromMm: 0,
      sampleToMm: null,
      place: usualPlace,
      rows: '',
      note: '',
    }
  }
  return {
    family: start.picture.fit.family,
    unit: start.unit,
    matrix: start.matrix,
    extraction: start.extraction,
    samplePosition: start.samplePosition,
    sampleFromMm: start.sampleFromMm,
    sampleToMm: start.sampleToMm,
    place: start.place,
    rows: start.picture.results.map((result) => `${result.typedSource}\t${result.typedValue}`).join('\n'),
    note: '',
  }
}

/** What a preview is asked with: everything but the note. */
export function previewBody({ note: _note, ...draft }: FitDraft): Omit<FitDraft, 'note'> {
  return draft
}
