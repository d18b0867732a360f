import { choleskyUpper } from '#server/stats/linear/dense.ts';
import { invertFromTriangle } from '#server/stats/linear/triangle-inverse.ts';
import { findRoot } from '#server/stats/distributions/find-root.ts';
import type { EntryEffects } from './entry-estimates.ts';
import type { NetworkFit } from './fit-network.ts';
import type { VariancePenalty } from './variance-penalty.ts';

/** Entries as a sample: each effect pulled towards the mean of its connected part. */
export interface ShrunkenEffects {
  /** variance of the entries' effects in each connected part, unit squared */
  readonly entryVariances: readonly number[];
  /** effects in the order of the frame's entries, comparable within a part */
  readonly effects: Float64Array;
  /** covariance of what is left to know of them, m × m; read it through contrasts only */
  readonly covariance: Float64Array;
}

interface PartProjection {
  /** P = S⁻¹ − S⁻¹11'S⁻¹/1'S⁻¹1, m × m */
  readonly p: Float64Array;
  /** P ĝ */
  readonly projected: Float64Array;
  /** ∂ restricted log-likelihood / ∂θ_g */
  readonly slope: number;
}

/** S = θ_g I + Φ for the entries of one part, their mean taken out. */
function projectPart(
  phi: Float64Array,
  effects: Float64Array,
  m: number,
  entryVariance: number,
): PartProjection | null {
  const s = phi.slice();
  for (let r = 0; r < m; r++) s[r * m + r]! += entryVariance;
  const triangle = choleskyUpper(s, m);
  if (triangle === null) return null;
  const p = invertFromTriangle(triangle, m);
  const rowSums = new Float64Array(m);
  for (let r = 0; r < m; r++) for (let c = 0; c < m; c++) rowSums[r]! += p[r * m + c]!;
  const total = rowSums.reduce((sum, x) => sum + x, 0);
  const projected = new Float64Array(m);
  let trace = 0;
  for (let r = 0; r < m; r++) {
    for (let c = 0; c < m; c++) {
      p[r * m + c]! -= (rowSums[r]! * rowSums[c]!) / total;
      projected[r]! += p[r * m + c]! * effects[c]!;
    }
    trace += p[r * m + r]!;
  }
  const square = projected.reduce((sum, x) => sum + x * x, 0);
  return { p, projected, slope: 0.5 * (square - trace) };
}

/** θ_g that maximises the restricted likelihood of the effects, less (ν/2)(ln θ_g + s_g²/θ_g) where there is a penalty. */
function findEntryVariance(
  phi: Float64Array,
  effects: Float64Array,
  m: number,
  penalty: VariancePenalty | null,
  usual: number,
): number {
  const slopeAt = (logVariance: number): number => {
    const variance = Math.exp(logVariance);
    const part = projectPart(phi, effects, m, variance);
    const pull = penalty === null ? 0 : 0.5 * penalty.nu * (usual / variance - 1);
    return (part === null ? 0 : variance * part.slope) + pull;
  };
  let spread = 0;
  for (let r = 0; r < m; r++) spread = Math.max(spread, effects[r]! * effects[r]!, phi[r * m + r]!);
  const low = Math.log(penalty === null ? 1e-10 * spread : usual) - (penalty === null ? 0 : 10);
  const high = Math.max(Math.log(spread), Math.log(usual)) + 5;
  if (slopeAt(low) <= 0) return 0;
  return Math.exp(findRoot(slopeAt, low, high, 1e-10));
}

/**
 * Best linear unbiased predictions of all entries with θ held at the fit.
 * @param all effects of every entry of the frame
 * @param usualEntryVariance s_g², what entries of the crop usually vary by
 */
export function shrinkEffects(
  fit: NetworkFit,
  all: EntryEffects,
  usualEntryVariance: number,
): ShrunkenEffects {
  const { chosen, covariance } = all;
  const m = chosen.length;
  const effects = new Float64Array(m);
  const left = new Float64Array(m * m);
  const entryVariances: number[] = [];
  for (let part = 0; part < fit.frame.partCount; part++) {
    const members = chosen.flatMap((i, r) => (fit.frame.entryPart[i] === part ? [r] : []));
    const size = members.length;
    if (size < 2) {
      entryVariances.push(0);
      continue;
    }
    const phi = new Float64Array(size * size);
    members.forEach((r, a) => members.forEach((c, b) => (phi[a * size + b] = covariance[r * m + c]!)));
    const centre = all.effects[members[0]!]!;
    const own = Float64Array.from(members, (r) => all.effects[r]! - centre);
    const entryVariance = findEntryVariance(phi, own, size, fit.penalty, usualEntryVariance);
    entryVariances.push(entryVariance);
    const projection = entryVariance > 0 ? projectPart(phi, own, size, entryVariance) : null;
    if (projection === null) continue;
    members.forEach((r, a) => {
      effects[r] = entryVariance * projection.projected[a]!;
      members.forEach((c, b) => {
        const own = a === b ? entryVariance : 0;
        left[r * m + c] = own - entryVariance * entryVariance * projection.p[a * size + b]!;
      });
    });
  }
  return { entryVariances, effects, covariance: left };
}
