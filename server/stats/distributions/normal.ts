const INV_SQRT_2PI = 0.398942280401432677939946059934;

/** exp(−x²/2), with the part of x² lost in rounding put back, so that a large x keeps its relative accuracy. */
function expHalfSquare(x: number): number {
  const scaled = 134_217_729 * x;
  const head = scaled - (scaled - x);
  const tail = x - head;
  const square = x * x;
  const lost = head * head - square + 2 * head * tail + tail * tail;
  return Math.exp(-0.5 * square) * (1 - 0.5 * lost);
}

// Cody's rational approximations, written for the normal integral. Horner's rule is spelled out because this is the
// innermost function of every multiple comparison.

function centreRatio(s: number): number {
  const numerator =
    (((0.065682337918207449113 * s + 2.2352520354606839287) * s + 161.02823106855587881) * s +
      1067.6894854603709582) *
      s +
    18154.981253343561249;
  return (
    numerator /
    ((((s + 47.20258190468824187) * s + 976.09855173777669322) * s + 10260.932208618978205) * s +
      45507.789335026729956)
  );
}

function middleRatio(x: number): number {
  const numerator =
    (((((((1.0765576773720192317e-8 * x + 0.39894151208813466764) * x + 8.8831497943883759412) * x +
      93.506656132177855979) *
      x +
      597.27027639480026226) *
      x +
      2494.5375852903726711) *
      x +
      6848.1904505362823326) *
      x +
      11602.651437647350124) *
      x +
    9842.7148383839780218;
  return (
    numerator /
    ((((((((x + 22.266688044328115691) * x + 235.38790178262499861) * x + 1519.377599407554805) * x +
      6485.558298266760755) *
      x +
      18615.571640885098091) *
      x +
      34900.952721145977266) *
      x +
      38912.003286093271411) *
      x +
      19685.429676859990727)
  );
}

function farCorrection(r: number): number {
  const numerator =
    ((((0.02307344176494017303 * r + 0.21589853405795699) * r + 0.1274011611602473639) * r +
      0.022235277870649807) *
      r +
      0.001421619193227893466) *
      r +
    2.9112874951168792e-5;
  return (
    (r * numerator) /
    (((((r + 1.28426009614491121) * r + 0.468238212480865118) * r + 0.0659881378689285515) * r +
      0.00378239633202758244) *
      r +
      7.29751555083966205e-5)
  );
}

/** P(Z > x) for x of at least 0. */
function upperTail(x: number): number {
  if (x <= 0.67448975) return 0.5 - x * centreRatio(x * x);
  if (x <= 5.656854249492381) return expHalfSquare(x) * middleRatio(x);
  if (x > 39) return 0;
  return (expHalfSquare(x) * (INV_SQRT_2PI - farCorrection(1 / (x * x)))) / x;
}

/** Density of the standard normal distribution. */
export function normalPdf(x: number): number {
  return INV_SQRT_2PI * Math.exp(-0.5 * x * x);
}

/**
 * P(Z > x) for a standard normal Z, accurate in relative terms in the upper tail.
 * Source: Cody (1969), Math. Comp. 23:631–637.
 */
export function normalUpper(x: number): number {
  return x >= 0 ? upperTail(x) : 1 - upperTail(-x);
}

/** P(Z ≤ x) for a standard normal Z, accurate in relative terms in the lower tail. Source: as normalUpper. */
export function normalCdf(x: number): number {
  return normalUpper(-x);
}

/** Σ c_i x^(n−i) by Horner's rule, highest power first. */
function polynomial(coefficients: readonly number[], x: number): number {
  let value = 0;
  for (const c of coefficients) value = value * x + c;
  return value;
}

// Wichura's PPND16; highest power first.
const Q_CENTRE_NUM = [
  2509.0809287301226727, 33430.575583588128105, 67265.770927008700853, 45921.953931549871457,
  13731.693765509461125, 1971.5909503065514427, 133.14166789178437745, 3.387132872796366608,
];
const Q_CENTRE_DEN = [
  5226.495278852854561, 28729.085735721942674, 39307.89580009271061, 21213.794301586595867,
  5394.1960214247511077, 687.1870074920579083, 42.313330701600911252, 1,
];
const Q_MIDDLE_NUM = [
  7.7454501427834140764e-4, 0.0227238449892691845833, 0.24178072517745061177, 1.27045825245236838258,
  3.64784832476320460504, 5.7694972214606914055, 4.6303378461565452959, 1.42343711074968357734,
];
const Q_MIDDLE_DEN = [
  1.05075007164441684324e-9, 5.475938084995344946e-4, 0.0151986665636164571966, 0.14810397642748007459,
  0.68976733498510000455, 1.6763848301838038494, 2.05319162663775882187, 1,
];
const Q_FAR_NUM = [
  2.01033439929228813265e-7, 2.71155556874348757815e-5, 0.0012426609473880784386, 0.026532189526576123093,
  0.29656057182850489123, 1.7848265399172913358, 5.4637849111641143699, 6.6579046435011037772,
];
const Q_FAR_DEN = [
  2.04426310338993978564e-15, 1.4215117583164458887e-7, 1.8463183175100546818e-5, 7.868691311456132591e-4,
  0.0148753612908506148525, 0.13692988092273580531, 0.59983220655588793769, 1,
];

/**
 * The x with P(Z ≤ x) = p.
 * @param p in [0, 1]; 0 and 1 give −∞ and ∞
 * @throws RangeError when p is outside [0, 1]
 * Source: Wichura (1988), algorithm AS 241, Appl. Statist. 37:477–484.
 */
export function normalQuantile(p: number): number {
  if (!(p >= 0 && p <= 1)) throw new RangeError(`normalQuantile needs 0 ≤ p ≤ 1, got ${p}`);
  const q = p - 0.5;
  if (Math.abs(q) <= 0.425) {
    const r = 0.180625 - q * q;
    return (q * polynomial(Q_CENTRE_NUM, r)) / polynomial(Q_CENTRE_DEN, r);
  }
  const tail = Math.min(p, 1 - p);
  if (tail === 0) return q < 0 ? -Infinity : Infinity;
  const r = Math.sqrt(-Math.log(tail));
  const size =
    r <= 5
      ? polynomial(Q_MIDDLE_NUM, r - 1.6) / polynomial(Q_MIDDLE_DEN, r - 1.6)
      : polynomial(Q_FAR_NUM, r - 5) / polynomial(Q_FAR_DEN, r - 5);
  return q < 0 ? -size : size;
}
