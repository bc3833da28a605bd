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
  fillBlock(ux, uy, uz, along, across);
  addBlock(hessian, i * size + i, size, 1);
  addBlock(hessian, j * size + j, size, 1);
  addBlock(hessian, i * size + j, size, -1);
  addBlock(hessian, j * size + i, size, -1);
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
  fillBlock(ux, uy, uz, along, across);
  addBlock(hessian, i * size + i, size, 1);
}

/** The block at hand: xx, yy, zz, xy, xz, yz. Numbers handed over one by one would be boxed. */
const block = new Float64Array(6);

function fillBlock(ux: number, uy: number, uz: number, along: number, across: number): void {
  block[0] = along * ux * ux + across;
  block[1] = along * uy * uy + across;
  block[2] = along * uz * uz + across;
  block[3] = along * ux * uy;
  block[4] = along * ux * uz;
  block[5] = along * uy * uz;
}

function addBlock(hessian: Float64Array, start: number, size: number, sign: number): void {
  const second = start + size;
  const third = second + size;
  const xy = sign * block[3];
  const xz = sign * block[4];
  const yz = sign * block[5];
  hessian[start] += sign * block[0];
  hessian[start + 1] += xy;
  hessian[start + 2] += xz;
  hessian[second] += xy;
  hessian[second + 1] += sign * block[1];
  hessian[second + 2] += yz;
  hessian[third] += xz;
  hessian[third + 1] += yz;
  hessian[third + 2] += sign * block[2];
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
