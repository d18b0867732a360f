/** A share of runs with its simulation error. */
export interface Share {
  readonly value: number;
  readonly error: number;
  readonly runs: number;
}

/** Means of a number of runs; the runs are independent, what happens within one is not. */
export class Tally {
  private sum = 0;
  private squares = 0;
  private runs = 0;

  add(value: number): void {
    this.sum += value;
    this.squares += value * value;
    this.runs++;
  }

  share(): Share {
    const value = this.sum / this.runs;
    const variance = Math.max(0, this.squares / this.runs - value * value);
    return { value, error: Math.sqrt(variance / this.runs), runs: this.runs };
  }
}

/** Stated chances within one band, what came true of them, and in how many runs. */
export interface ReliabilityBin {
  readonly from: number;
  readonly to: number;
  readonly stated: number;
  readonly happened: Share;
}

const EDGES = [0, 0.05, 0.2, 0.4, 0.6, 0.8, 0.95, 1];

/** Chances stated, sorted into bands, beside how often they came true. */
export class Bins {
  private readonly stated = EDGES.slice(1).map(() => new Tally());
  private readonly happened = EDGES.slice(1).map(() => new Tally());

  add(stated: number, happened: number): void {
    const bin = Math.max(
      0,
      EDGES.findLastIndex((edge) => stated >= edge && edge < 1),
    );
    this.stated[bin]!.add(stated);
    this.happened[bin]!.add(happened);
  }

  list(): ReliabilityBin[] {
    return this.stated.flatMap((tally, bin) => {
      const stated = tally.share();
      return stated.runs === 0
        ? []
        : [
            {
              from: EDGES[bin]!,
              to: EDGES[bin + 1]!,
              stated: stated.value,
              happened: this.happened[bin]!.share(),
            },
          ];
    });
  }
}
