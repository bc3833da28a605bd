/** Adds the curvature of single interactions to a full symmetric matrix (size × size, row by row). */

/**
 * Adds `along` · u uᵀ + `across` · 1 for a force between two atoms at offsets i and j (3 × atom) in direction u:
 * positive on the diagonal blocks, negative between the atoms.
 */
export function addPairBlock(
  hessian: Float64Array,
  size: number,
  i: number,
  j: number,
  ux: number,
  uy: number,
  uz: number,
  along: number,
  across: number,
): void {
  const xx = along * ux * ux + across;
  const yy = along * uy * uy + across;
  const zz = along * uz * uz + across;
  const xy = along * ux * uy;
  const xz = along * ux * uz;
  const yz = along * uy * uz;
  addSymmetric(hessian, i * size + i, size, xx, yy, zz, xy, xz, yz);
  addSymmetric(hessian, j * size + j, size, xx, yy, zz, xy, xz, yz);
  addSymmetric(hessian, i * size + j, size, -xx, -yy, -zz, -xy, -xz, -yz);
  addSymmetric(hessian, j * size + i, size, -xx, -yy, -zz, -xy, -xz, -yz);
}

/** Adds `along` · u uᵀ + `across` · 1 to the diagonal block of the atom at offset i (3 × atom). */
export function addDiagonalBlock(
  hessian: Float64Array,
  size: number,
  i: number,
  ux: number,
  uy: number,
  uz: number,
  along: number,
  across: number,
): void {
  const xx = along * ux * ux + across;
  const yy = along * uy * uy + across;
  const zz = along * uz * uz + across;
  const start = i * size + i;
  addSymmetric(hessian, start, size, xx, yy, zz, along * ux * uy, along * ux * uz, along * uy * uz);
}

function addSymmetric(
  hessian: Float64Array,
  start: number,
  size: number,
  xx: number,
  yy: number,
  zz: number,
  xy: number,
  xz: number,
  yz: number,
): void {
  hessian[start] += xx;
  hessian[start + 1] += xy;
  hessian[start + 2] += xz;
  hessian[start + size] += xy;
  hessian[start + size + 1] += yy;
  hessian[start + size + 2] += yz;
  hessian[start + 2 * size] += xz;
  hessian[start + 2 * size + 1] += yz;
  hessian[start + 2 * size + 2] += zz;
}

/**
 * Adds `scale` · v vᵀ, where v has three components at each of the first `atoms` offsets (3 × atom) of `offsets`, in
 * the same order in `vector`.
 */
export function addOuterProduct(
  hessian: Float64Array,
  size: number,
  offsets: Int32Array,
  vector: Float64Array,
  atoms: number,
  scale: number,
): void {
  for (let a = 0; a < atoms; a++) {
    const row = offsets[a] * size;
    const x = scale * vector[3 * a];
    const y = scale * vector[3 * a + 1];
    const z = scale * vector[3 * a + 2];
    for (let b = 0; b < atoms; b++) {
      const u = vector[3 * b];
      const v = vector[3 * b + 1];
      const w = vector[3 * b + 2];
      const first = row + offsets[b];
      const second = first + size;
      const third = second + size;
      hessian[first] += x * u;
      hessian[first + 1] += x * v;
      hessian[first + 2] += x * w;
      hessian[second] += y * u;
      hessian[second + 1] += y * v;
      hessian[second + 2] += y * w;
      hessian[third] += z * u;
      hessian[third + 1] += z * v;
      hessian[third + 2] += z * w;
    }
  }
}
