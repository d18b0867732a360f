/** One timed piece of work, done by the engine and, under the same key, by R. */
export interface BenchTask {
  /** names the row in the R script's answer */
  readonly key: string;
  readonly label: string;
  readonly run: () => unknown;
  /** what the engine is held to: so many times faster than R, or so many milliseconds */
  readonly target?: { readonly ratio?: number; readonly ms?: number };
  /** timed runs; 21 unless told */
  readonly runs?: number;
}

/** Tasks with the R script that does the same: `Rscript FILE FOLDER` prints a line "key seconds" for each key. */
export interface BenchSuite {
  readonly title: string;
  readonly tasks: readonly BenchTask[];
  /** beside this file; null where R does not take part */
  readonly script: string | null;
  /** writes what the script reads */
  readonly writeData: (folder: string) => void;
}

/** Uniform numbers in [0, 1), the same in every run (mulberry32). */
export function seededNumbers(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

/** Normal deviates by Box and Muller's method. */
export function seededNormals(seed: number): () => number {
  const next = seededNumbers(seed);
  return () => Math.sqrt(-2 * Math.log(1 - next())) * Math.cos(2 * Math.PI * next());
}

/** Median milliseconds of a task in a warm process. */
export function timeTask({ run, runs = 21 }: BenchTask): number {
  const once = () => {
    const start = performance.now();
    run();
    return performance.now() - start;
  };
  // warm until the compiler has seen enough, but never for long
  const begin = performance.now();
  for (let i = 0; i < 300 && performance.now() - begin < 2000; i++) run();
  const times = Array.from({ length: runs }, once).sort((a, b) => a - b);
  return times[Math.floor(runs / 2)]!;
}
