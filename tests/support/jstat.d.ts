/** The part of jstat that the cross-check uses; the package brings no types of its own. */
declare module 'jstat' {
  type Distribution<Parameters extends number[]> = {
    inv: (p: number, ...parameters: Parameters) => number
    cdf: (x: number, ...parameters: Parameters) => number
  }
  const jstat: { jStat: JStat }
  export default jstat
  type JStat = {
    mean: (values: readonly number[]) => number
    stdev: (values: readonly number[], isSample: boolean) => number
    erf: (x: number) => number
    studentt: Distribution<[df: number]>
    chisquare: Distribution<[df: number]>
    centralF: Distribution<[df1: number, df2: number]>
    beta: Distribution<[alpha: number, beta: number]>
    anovafscore: (...groups: readonly number[][]) => number
    anovaftest: (...groups: readonly number[][]) => number
    models: {
      ols: (
        y: readonly number[],
        x: readonly (readonly number[])[],
      ) => { coef: number[]; R2: number; t: { se: number[]; sigmaHat: number } }
    }
  }
}
