/** The few functions of jstat that the tests hold the engine against; the package has no types of its own. */
declare module 'jstat' {
  export const jStat: {
    normal: {
      cdf(x: number, mean: number, sd: number): number;
      inv(p: number, mean: number, sd: number): number;
    };
    studentt: { cdf(x: number, df: number): number; inv(p: number, df: number): number };
    centralF: {
      cdf(x: number, df1: number, df2: number): number;
      inv(p: number, df1: number, df2: number): number;
    };
    chisquare: { cdf(x: number, df: number): number };
    tukey: { cdf(q: number, groups: number, df: number): number };
  };
}
