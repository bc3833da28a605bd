/**
 * The parameterized interactions of one molecule: what typing and parameters produce and what the energy terms
 * consume. Every table is a structure of arrays; strides are named beside them. Units as in the MMFF94 papers: force
 * constants in mdyn/Å or mdyn Å/rad², lengths in Å, angles in degrees, energies in kcal/mol.
 */
export interface Interactions {
  readonly bonds: {
    /** stride 2: i, j */
    readonly atoms: Int32Array;
    readonly length: Float64Array;
    readonly force: Float64Array;
  };
  readonly angles: {
    /** stride 3: i, j, k with j the vertex */
    readonly atoms: Int32Array;
    readonly angle: Float64Array;
    readonly force: Float64Array;
    /** 1 where the vertex is linear (MMFF94 part I, equation 4) */
    readonly linear: Uint8Array;
  };
  readonly stretchBends: {
    /** stride 3: i, j, k with j the vertex */
    readonly atoms: Int32Array;
    /** reference lengths of i-j and k-j, and reference angle */
    readonly lengthIJ: Float64Array;
    readonly lengthKJ: Float64Array;
    readonly angle: Float64Array;
    readonly forceIJK: Float64Array;
    readonly forceKJI: Float64Array;
  };
  readonly outOfPlanes: {
    /** stride 4: i, j, k, l with j the center; the angle is between bond j-l and the plane i-j-k */
    readonly atoms: Int32Array;
    readonly force: Float64Array;
  };
  readonly torsions: {
    /** stride 4: i, j, k, l */
    readonly atoms: Int32Array;
    readonly v1: Float64Array;
    readonly v2: Float64Array;
    readonly v3: Float64Array;
  };
  readonly vanDerWaals: {
    /** stride 2: i, j with i < j; pairs in relation 1-4 or farther */
    readonly atoms: Int32Array;
    readonly radius: Float64Array;
    readonly depth: Float64Array;
  };
  readonly electrostatics: {
    /** stride 2: i, j with i < j; pairs in relation 1-4 or farther whose charges are both not zero */
    readonly atoms: Int32Array;
    /** q_i q_j, times 0.75 for a 1-4 pair, in squared electron charges */
    readonly chargeProduct: Float64Array;
  };
}
