/**
 * Returns the energy in kcal/mol at coordinates `x` (Å, 3N) and ADDS its gradient, kcal/mol/Å, to `gradient`. A bond
 * term, a restraint and a whole force field are the same thing; the minimizer knows nothing else.
 */
export type EnergyTerm = (x: Float64Array, gradient: Float64Array) => number;

/**
 * ADDS a positive semidefinite approximation of a term's second derivatives at `x`, kcal/mol/Å², to the full symmetric
 * matrix `hessian` (3N × 3N, row by row; both triangles). It steers the minimizer and never touches a result.
 */
export type CurvatureTerm = (x: Float64Array, hessian: Float64Array) => void;
