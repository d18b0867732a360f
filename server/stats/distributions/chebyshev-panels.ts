/** Nodes of a degree, and what turns values at them into coefficients. */
interface ChebyshevRule {
  readonly nodes: Float64Array;
  /** Row j gives the coefficient of the polynomial of degree j. */
  readonly transform: readonly Float64Array[];
}

function chebyshevRule(degree: number): ChebyshevRule {
  const count = degree + 1;
  const angle = (i: number): number => (Math.PI * (i + 0.5)) / count;
  return {
    nodes: Float64Array.from({ length: count }, (_, i) => Math.cos(angle(i))),
    transform: Array.from({ length: count }, (_, j) =>
      Float64Array.from({ length: count }, (__, i) => ((j === 0 ? 1 : 2) / count) * Math.cos(j * angle(i))),
    ),
  };
}

const panelRule = chebyshevRule(18);
const spanRule = chebyshevRule(15);

/** Chebyshev coefficients of f on [start, start + width]. */
function fitPanel(f: (x: number) => number, start: number, width: number, rule: ChebyshevRule): Float64Array {
  const values = rule.nodes.map((node) => f(start + (width / 2) * (node + 1)));
  return Float64Array.from(rule.transform, (row) =>
    row.reduce((sum, factor, i) => sum + factor * (values[i] ?? 0), 0),
  );
}

/** Clenshaw's recurrence. */
function sumPanel(coefficients: Float64Array, x: number): number {
  const twice = 2 * x;
  let b1 = 0;
  let b2 = 0;
  for (let j = coefficients.length - 1; j > 0; j -= 1) {
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
    const panel = (panels[index] ??= fitPanel(f, index * width, width, panelRule));
    return sumPanel(panel, (2 * x) / width - 2 * index - 1);
  };
}

/**
 * A stand-in for a costly smooth function that is wanted between two places alone.
 * @param f smooth from `low` to `high`, where a polynomial of degree 15 stands for it
 */
export function tabulateBetween(f: (x: number) => number, low: number, high: number): (x: number) => number {
  const width = high - low;
  const coefficients = fitPanel(f, low, width, spanRule);
  return (x) => sumPanel(coefficients, (2 * (x - low)) / width - 1);
}
