/** Rows of R⁻¹ from the upper triangle R, n × n; zero below the diagonal. */
function invertTriangle(r: Float64Array, n: number): Float64Array {
  const inv = new Float64Array(n * n);
  for (let i = n - 1; i >= 0; i--) {
    const row = i * n;
    // R_i,k times row k, four rows at a time; row k + 3 is zero before its own diagonal
    let k = i + 1;
    for (; k + 4 <= n; k += 4) {
      const f0 = r[row + k]!;
      const f1 = r[row + k + 1]!;
      const f2 = r[row + k + 2]!;
      const f3 = r[row + k + 3]!;
      const k0 = k * n;
      const k1 = k0 + n;
      const k2 = k1 + n;
      const k3 = k2 + n;
      for (let j = k; j < n; j++)
        inv[row + j]! += f0 * inv[k0 + j]! + f1 * inv[k1 + j]! + f2 * inv[k2 + j]! + f3 * inv[k3 + j]!;
    }
    for (; k < n; k++) {
      const factor = r[row + k]!;
      for (let j = k; j < n; j++) inv[row + j]! += factor * inv[k * n + j]!;
    }
    const diagonal = 1 / r[row + i]!;
    for (let j = i + 1; j < n; j++) inv[row + j]! *= -diagonal;
    inv[row + i] = diagonal;
  }
  return inv;
}

/** (R'R)⁻¹ from the upper triangle R, n × n; full symmetric result, row-major. */
export function invertFromTriangle(r: Float64Array, n: number): Float64Array {
  const inv = invertTriangle(r, n);
  const out = new Float64Array(n * n);
  let j = 0;
  for (; j + 4 <= n; j += 4) {
    const j0 = j * n;
    const j1 = j0 + n;
    const j2 = j1 + n;
    const j3 = j2 + n;
    // rows up to the last of the four: what lies below the diagonal is overwritten by its mirror image
    for (let i = 0; i < j + 4; i++) {
      const row = i * n;
      let s0 = 0;
      let s1 = 0;
      let s2 = 0;
      let s3 = 0;
      for (let k = j; k < n; k++) {
        const value = inv[row + k]!;
        s0 += value * inv[j0 + k]!;
        s1 += value * inv[j1 + k]!;
        s2 += value * inv[j2 + k]!;
        s3 += value * inv[j3 + k]!;
      }
      out[row + j] = s0;
      out[row + j + 1] = s1;
      out[row + j + 2] = s2;
      out[row + j + 3] = s3;
    }
  }
  for (; j < n; j++)
    for (let i = 0; i <= j; i++) {
      let sum = 0;
      for (let k = j; k < n; k++) sum += inv[i * n + k]! * inv[j * n + k]!;
      out[i * n + j] = sum;
    }
  for (let i = 0; i < n; i++) for (let k = i + 1; k < n; k++) out[k * n + i] = out[i * n + k]!;
  return out;
}
