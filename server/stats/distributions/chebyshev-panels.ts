const DEGREE = 18;
const COUNT = DEGREE + 1;

const NODES = Float64Array.from({ length: COUNT }, (_, i) => Math.cos((Math.PI * (i + 0.5)) / COUNT));
/** Row j turns values at the nodes into the coefficient of the polynomial of degree j. */
const TRANSFORM = Array.from({ length: COUNT }, (_, j) =>
  Float64Array.from(
    { length: COUNT },
    (__, i) => ((j === 0 ? 1 : 2) / COUNT) * Math.cos((Math.PI * j * (i + 0.5)) / COUNT),
  ),
);

/** Chebyshev coefficients of f on [start, start + width]. */
function fitPanel(f: (x: number) => number, start: number, width: number): Float64Array {
  const values = NODES.map((node) => f(start + (width / 2) * (node + 1)));
  return Float64Array.from(TRANSFORM, (row) =>
    row.reduce((sum, factor, i) => sum + factor * (values[i] ?? 0), 0),
  );
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
 * A cheap stand-in for a costly smooth function, tabulated panel by panel when a panel is first asked for.
 * @param f smooth on [0, ∞), of moderate size
 * @param width of a panel, on which a polynomial of degree 18 stands for f
 */
export function tabulate(f: (x: number) => number, width: number): (x: number) => number {
  const panels: (Float64Array | undefined)[] = [];
  return (x) => {
    const index = Math.floor(x / width);
    const panel = (panels[index] ??= fitPanel(f, index * width, width));
    return sumPanel(panel, (2 * x) / width - 2 * index - 1);
  };
}
