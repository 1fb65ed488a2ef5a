import type { FiringDto, MarkDto } from '@/lib/firings/schema'

/** A mark on the picture, or null: phases and stages stand there as lines already, notes are too long. */
export function pictureWords(mark: MarkDto): string | null {
  switch (mark.kind) {
    case 'phase':
    case 'stage':
    case 'note':
    case 'undone':
    case 'reason':
    case 'advice':
      return null
    case 'turn':
      return 'turned'
    case 'turn over':
      return 'turned over'
    case 'move':
      return 'moved'
    case 'swap':
      return 'probe swapped'
    case 'call':
      return `called ${mark.call ?? ''}`.trim()
    default:
      return mark.kind
  }
}

const phaseWords = {
  preheating: 'Preheat began',
  bending: 'Bend began',
  toasting: 'Toast began',
  resting: 'Rest began',
} as const

const kindWords: Record<MarkDto['kind'], string> = {
  phase: '',
  stage: '',
  call: '',
  note: 'Note',
  pull: 'Pulled',
  stir: 'Stir',
  feed: 'Feed',
  mist: 'Mist',
  'lid on': 'Lid on',
  'lid off': 'Lid off',
  turn: 'Turned',
  'turn over': 'Turned over',
  swap: 'Probe swapped',
  undone: 'Taken back',
  reason: 'Reason',
  advice: 'Advice',
  move: 'Moved',
}

function stageName(firing: FiringDto, position: number | null): string {
  const stage = firing.recipeCopy?.content.stages[(position ?? 0) - 1]
  return stage?.name ?? 'the stage'
}

function stepName(firing: FiringDto, { step, stagePosition }: MarkDto): string {
  if (step === 'stage') return stageName(firing, stagePosition)
  return step === 'bend' ? 'the pull' : `the ${step ?? 'step'}`
}

function mainWords(firing: FiringDto, mark: MarkDto): string {
  if (mark.kind === 'phase' && mark.phase !== null) return phaseWords[mark.phase]
  if (mark.kind === 'stage') return `End of ${stageName(firing, mark.stagePosition)}`
  if (mark.kind === 'call') return `${stageName(firing, mark.stagePosition)} called ${mark.call ?? ''}`
  if (mark.kind === 'reason') return `Why ${stepName(firing, mark)} was short`
  if (mark.kind === 'advice') return mark.answer === 'taken' ? 'Advice taken' : 'Advice not taken now'
  return kindWords[mark.kind]
}

/** A mark in the list of what happened. */
export function listWords(firing: FiringDto, mark: MarkDto): string {
  const main = mainWords(firing, mark)
  return mark.words === '' ? main : `${main}: ${mark.words}`
}
