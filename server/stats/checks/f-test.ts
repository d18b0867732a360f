/** An F test's result. */
export interface FTest {
  readonly f: number;
  readonly df1: number;
  readonly df2: number;
  readonly p: number;
}
