/**
 * The colour that wood takes from heat dose, raw oak to char: 256 steps, interpolated in Oklab between the
 * eight wood tokens of the look. Computed once and kept, so that no colour package reaches the browser;
 * tests/ui/wood-scale.test.ts computes it again and compares.
 */
const WOOD_SCALE_HEX =
  'eaddbdeadcbce9dbbae9dbb9e9dab8e8d9b6e8d8b5e8d7b4e7d6b3e7d6b1e7d5b0e6d4afe6d3ade6d2ace5d1abe5d1a9' +
  'e5d0a8e5cfa7e4cea5e4cda4e4cda3e3cca1e3cba0e3ca9fe2c99de2c89ce2c89be1c79ae1c698e1c597e0c496e0c394' +
  'e0c393dfc292dfc190dec08fdebf8edebe8cddbd8bddbc8adcbb89dcba87dbb986dbb885dab784dab682d9b581d9b480' +
  'd8b37fd8b27ed7b17cd7b07bd6af7ad6ae79d5ad77d4ac76d4ab75d3aa74d3a972d2a871d2a770d1a66fd1a56ed0a46c' +
  'd0a36bcfa26acfa169cea067ce9f66cd9e65cd9d64cc9c62cb9b61cb9a60ca995fc9985ec8965dc7955cc7945bc6935a' +
  'c59259c49158c39057c28e56c28d56c18c55c08b54bf8a53be8952bd8851bc8750bc854fbb844eba834db9824cb8814b' +
  'b7804ab67f49b67e48b57c48b47b47b37a46b27945b17844b17743b07642af7541ae7440ad723fac713eab703eaa6f3d' +
  'a96e3da86d3ca76c3ca56c3ba46b3ba36a3aa2693aa16839a067399f66389d65389c64389b63379a6237996136986036' +
  '975f35965e35945d34935d34925c33915b33905a328f59328e58318d57318c56318a553089543088532f87522f86512e' +
  '85512e84502d834f2d814e2d804d2c7f4c2c7e4c2c7c4b2b7b4a2b7a492b79482a77482a76472a754629744529734529' +
  '7144287043286f42286e41276d41276b40276a3f26693e26683e26673d25653c25643b25633b24623a246139245f3823' +
  '5e38235d37235c36225b352259352258342157332156322155322054312053302051301f502f1f4f2f1f4e2e1e4d2d1e' +
  '4c2d1e4b2c1d4a2b1d482b1d472a1c46291c45291c44281b43281b42271b41261b40261a3f251a3d241a3c24193b2319' +
  '3a2219392218382118372118362017351f17341f17331e16321e16311d16301c152f1c152e1b152d1b142c1a142b1a14' +
  '2a1a132a191329191228181227181226171126171125161124161023161022151022150f21140f20140f1f130e1e130e' +
  '1e120e1d120e1c120d1b110d1a110d1a100c19100c180f0c170f0b170f0b160e0b150e0a140d0a140d0a130c09120c09'
const STEPS = WOOD_SCALE_HEX.length / 6

/** Position on the wood scale, 0 to 1, of a dose given as log10 of minutes at 200 °C; −Infinity is raw oak. */
export function woodScalePosition(log10DoseMin: number): number {
  const position = (log10DoseMin + 2.6) / 5
  return position > 0 ? Math.min(position, 1) : 0
}

/** The colour at a position, as "#rrggbb". */
export function woodColour(position: number): string {
  const step = stepAt(position)
  return `#${WOOD_SCALE_HEX.slice(step * 6, step * 6 + 6)}`
}

/** The whole scale as opaque pixels, red in the lowest byte, as ImageData holds them on little-endian machines. */
export function woodScalePixels(): Uint32Array {
  return Uint32Array.from({ length: STEPS }, (_, step) => {
    const value = Number.parseInt(WOOD_SCALE_HEX.slice(step * 6, step * 6 + 6), 16)
    const red = value >> 16
    const green = (value >> 8) & 0xff
    const blue = value & 0xff
    return ((0xff << 24) | (blue << 16) | (green << 8) | red) >>> 0
  })
}

function stepAt(position: number): number {
  return Math.round(Math.min(Math.max(position, 0), 1) * (STEPS - 1))
}
