/** Constants the energy terms share. */

/** Converts mdyn Å to kcal/mol as the MMFF94 papers do (J. Comput. Chem. 1996, 17, 490, equation 2). */
export const KCAL_PER_MDYN_ANGSTROM = 143.9325;
/** Radians in a degree. */
export const RADIANS_PER_DEGREE = Math.PI / 180;

/**
 * Added to the squared sines (times lengths to the fourth power or more, in Å) that stand in denominators. Where three
 * atoms of an angle or torsion lie on a line the coordinate has no derivative; this rounds the corner off within
 * a millionth of a radian, so that energy and gradient stay finite and smooth and agree with each other.
 */
export const COLLINEAR_GUARD = 1e-12;
/** Added to squared distances in Å², so that atoms on top of each other have a finite gradient. */
export const COINCIDENT_GUARD = 1e-20;

/** cs of bond stretching, 1/Å, and 7/12 of its square, 1/Å². */
export const CUBIC_STRETCH = -2;
export const QUARTIC_STRETCH = (7 / 12) * CUBIC_STRETCH ** 2;
/** cb of angle bending, 1/radian; -0.006981317 1/degree. */
export const CUBIC_BEND = -0.4;
