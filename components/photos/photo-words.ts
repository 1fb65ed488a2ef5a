import type { PhotoKind } from '@/lib/firings/photo-kinds'

export const photoKindNames: Record<PhotoKind, string> = {
  face: 'Face',
  blister: 'Blister',
  other: 'Other',
}

/** What a picture shows, for who cannot see it: "Face: bilge, after the rest". */
export function photoWords({ kind, caption }: { kind: PhotoKind; caption: string }): string {
  return caption === '' ? `${photoKindNames[kind]}, without a caption` : `${photoKindNames[kind]}: ${caption}`
}
