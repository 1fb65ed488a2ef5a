import { roomType } from './fireside-type'

/** How large a row's figures are: by how many rows share the screen, and whether nobody ever touches it. */
export type RoomSize = { isTight: boolean; isWall: boolean }

/** Five rows and more are low: the figures are a little smaller. */
const TIGHT_FROM = 5

export function roomSizeOf(rows: number, isWall: boolean): RoomSize {
  return { isTight: rows >= TIGHT_FROM, isWall }
}

export function roomNumeral({ isTight, isWall }: RoomSize) {
  if (isWall) return isTight ? roomType.wallTight : roomType.wall
  return isTight ? roomType.numeralTight : roomType.numeral
}

export function roomWords({ isWall }: RoomSize) {
  return isWall ? roomType.wallWords : roomType.words
}

/** Hearth, picture, wood, dose, time. */
export function roomColumns({ isTight, isWall }: RoomSize): string {
  // In less room (the same panel at 200 %) the figures stand under the picture.
  if (!isWall) return 'min-[1100px]:grid-cols-[168px_minmax(0,1fr)_200px_230px_290px]'
  return isTight
    ? 'grid-cols-[150px_minmax(0,1fr)_206px_240px_316px]'
    : 'grid-cols-[150px_minmax(0,1fr)_256px_280px_360px]'
}
