/** Seed of the shifts: fixed, so that the same question always gets the same answer. */
const SEED = 20_240_917;
const SHIFTS = 8;
const FIRST_POINTS = 500;
const MOST_POINTS = 2_000;
/** Standard errors, of 8 shifts, within which the truth is stated to lie. */
const ERROR_FACTOR = 3.5;

/** Marsaglia's xorshift with 32 bits, as numbers in (0, 1). */
function seededUniform(seed: number): () => number {
  let state = seed | 0;
  return () => {
    state ^= state << 13;
    state ^= state >>> 17;
    state ^= state << 5;
    return ((state >>> 0) + 0.5) / 4_294_967_296;
  };
}

function firstPrimes(count: number): number[] {
  const primes: number[] = [];
  for (let n = 2; primes.length < count; n += 1) {
    if (primes.every((prime) => n % prime !== 0)) primes.push(n);
  }
  return primes;
}

/**
 * Mean of a function over the unit cube by a lattice of square roots of primes with random shifts, doubled until
 * its error is small enough or the points run out.
 * @param f function of a point; the point is overwritten by the next call
 * @param dimensions of the cube, at least 1
 * @param target error at which to stop
 * @returns mean, and the error stated for it
 * Source: Richtmyer (1951); Cranley & Patterson (1976), SIAM J. Numer. Anal. 13:904–914; Genz & Bretz (2002),
 * J. Comput. Graph. Statist. 11:950–971.
 */
export function averageOverLattice(
  f: (point: Float64Array) => number,
  dimensions: number,
  target: number,
): { readonly mean: number; readonly error: number } {
  const generator = firstPrimes(dimensions).map((prime) => Math.sqrt(prime) % 1);
  const uniform = seededUniform(SEED);
  const shifts = Array.from({ length: SHIFTS }, () => generator.map(uniform));
  const sums = new Float64Array(SHIFTS);
  const point = new Float64Array(dimensions);
  let done = 0;
  for (let points = FIRST_POINTS; ; points *= 2) {
    shifts.forEach((shift, s) => {
      for (let k = done + 1; k <= points; k += 1) {
        for (let d = 0; d < dimensions; d += 1) {
          // Folding makes the function periodic, which a lattice needs.
          point[d] = Math.abs(2 * ((k * (generator[d] as number) + (shift[d] as number)) % 1) - 1);
        }
        sums[s] = (sums[s] as number) + f(point);
      }
    });
    done = points;
    const means = sums.map((sum) => sum / points);
    const mean = means.reduce((total, own) => total + own, 0) / SHIFTS;
    const variance = means.reduce((total, own) => total + (own - mean) ** 2, 0) / (SHIFTS - 1) / SHIFTS;
    const error = ERROR_FACTOR * Math.sqrt(variance);
    if (error <= target || 2 * points > MOST_POINTS) return { mean, error };
  }
}
