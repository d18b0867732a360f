/**
 * An upper tail P(W > w) of a statistic of normal variables, held as scaled(w) = exp(decay w²) P(W > w):
 * smooth and of moderate size everywhere, so that a small tail keeps its relative accuracy.
 */
export interface ScaledTail {
  readonly decay: number;
  scaled(w: number): number;
}

const PANEL_WIDTH = 1;
const DEGREE = 14;
/** Beyond this the unscaled tail nears the smallest double. */
const LAST_SQUARE = 660;

const NODES = Float64Array.from({ length: DEGREE + 1 }, (_, i) =>
  Math.cos((Math.PI * (i + 0.5)) / (DEGREE + 1)),
);

/** Chebyshev coefficients of f on [start, start + PANEL_WIDTH]. */
function fitPanel(f: (w: number) => number, start: number): Float64Array {
  const n = DEGREE + 1;
  const values = NODES.map((node) => f(start + (PANEL_WIDTH / 2) * (node + 1)));
  return Float64Array.from({ length: n }, (_, j) => {
    let sum = 0;
    for (let i = 0; i < n; i += 1) sum += (values[i] ?? 0) * Math.cos((Math.PI * j * (i + 0.5)) / n);
    return (sum * (j === 0 ? 1 : 2)) / n;
  });
}

/** Clenshaw's recurrence. */
function sumPanel(coefficients: Float64Array, x: number): number {
  const twice = 2 * x;
  let b1 = 0;
  let b2 = 0;
  for (let j = DEGREE; j > 0; j -= 1) {
    const b0 = twice * b1 - b2 + (coefficients[j] as number);
    b2 = b1;
    b1 = b0;
  }
  return x * b1 - b2 + (coefficients[0] as number);
}

/**
 * Tabulates a costly upper tail, panel by panel, when a panel is first asked for.
 * @param tail P(W > w) for w of at least 0, falling like exp(−decay w²)
 * @param decay see ScaledTail
 */
export function tabulateTail(tail: (w: number) => number, decay: number): ScaledTail {
  const panels: (Float64Array | undefined)[] = [];
  const last = Math.sqrt(LAST_SQUARE / decay);
  const exact = (w: number): number => tail(w) * Math.exp(decay * w * w);
  return {
    decay,
    scaled(w) {
      const at = Math.min(w, last);
      const index = Math.floor(at / PANEL_WIDTH);
      const panel = (panels[index] ??= fitPanel(exact, index * PANEL_WIDTH));
      return sumPanel(panel, (2 * (at - index * PANEL_WIDTH)) / PANEL_WIDTH - 1);
    },
  };
}
