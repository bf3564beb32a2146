/** What the tests use of jstat, which ships no types; a reference library, never the thing under test. */
declare module 'jstat' {
  const jstat: {
    normal: { cdf(x: number, mean: number, deviation: number): number }
    beta: { inv(p: number, alpha: number, beta: number): number }
    hypgeom: { cdf(x: number, lot: number, bad: number, sample: number): number }
    gamma: { cdf(x: number, shape: number, scale: number): number }
  }
  export default jstat
}
