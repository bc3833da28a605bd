/**
 * The bonded terms, two interactions at a time. Formulas and derivations stand with the plain versions in terms/; here
 * are the layouts of the records: first the byte offsets of the atoms (two lanes each), then pairs of constants.
 */
import {
  COINCIDENT_GUARD,
  COLLINEAR_GUARD,
  CUBIC_BEND,
  CUBIC_STRETCH,
  QUARTIC_STRETCH,
} from '../terms/constants';
import { f64x2 } from './assembler';
import type { Code } from './assembler';
import {
  addToGradient,
  arcTangent,
  between,
  crossProduct,
  dotProduct,
  lanes,
  product,
  recordAtoms,
  recordValue,
  scaledDifference,
  setVector,
  sum,
  vector,
} from './lanes';
import type { Scene } from './lanes';

const { add, subtract, multiply, divide, squareRoot, constant, largest } = f64x2;

/** Two bonds: atoms i, j; then length and 143.9325 times the force constant. */
export function bondPart(scene: Scene): Code {
  const { frame, energy } = scene;
  const { atoms, code } = recordAtoms(scene, 2);
  const d = vector(frame);
  const [r, change, stiffness] = lanes(frame, 3);
  return [
    ...code,
    ...setVector(d, between(scene, atoms[1], atoms[0])),
    ...r.set(squareRoot(add(dotProduct(d, d), constant(COINCIDENT_GUARD)))),
    ...change.set(subtract(r.get, recordValue(scene, 16))),
    ...stiffness.set(multiply(recordValue(scene, 32), change.get)),
    ...energy.set(add(energy.get, product(constant(0.5), stiffness.get, change.get, series(1, 1)))),
    ...stiffness.set(divide(multiply(stiffness.get, series(1.5, 2)), r.get)),
    ...setVector(d, (axis) => multiply(d[axis].get, stiffness.get)),
    ...addToGradient(scene, atoms[0], d),
    ...setVector(d, (axis) => subtract(constant(0), d[axis].get)),
    ...addToGradient(scene, atoms[1], d),
  ];

  function series(cubic: number, quartic: number): Code {
    const slope = add(
      constant(cubic * CUBIC_STRETCH),
      multiply(constant(quartic * QUARTIC_STRETCH), change.get),
    );
    return add(constant(1), multiply(change.get, slope));
  }
}

/**
 * Two angles with their stretch-bends: atoms i, j, k and a gap; then the angle in radians, 143.9325 times the bending
 * constant, the two lengths and 143.9325 times the two coupling constants per radian.
 */
export function anglePart(scene: Scene): Code {
  const { frame, energy } = scene;
  const { atoms, code } = recordAtoms(scene, 3);
  const [i, j, k] = atoms;
  const [u, v, f, g] = [vector(frame), vector(frame), vector(frame), vector(frame)];
  const [uu, vv, uv, sine, rij, rkj, bend, stiff, stretch, slope] = lanes(frame, 10);
  const couplingIJ = recordValue(scene, 96);
  const couplingKJ = recordValue(scene, 112);
  return [
    ...code,
    ...setVector(u, between(scene, j, i)),
    ...setVector(v, between(scene, j, k)),
    ...uu.set(add(dotProduct(u, u), constant(COINCIDENT_GUARD))),
    ...vv.set(add(dotProduct(v, v), constant(COINCIDENT_GUARD))),
    ...uv.set(dotProduct(u, v)),
    ...rij.set(squareRoot(uu.get)),
    ...rkj.set(squareRoot(vv.get)),
    ...sine.set(subtract(multiply(uu.get, vv.get), multiply(uv.get, uv.get))),
    ...sine.set(
      squareRoot(largest(add(sine.get, constant(COLLINEAR_GUARD)), constant(COLLINEAR_GUARD))),
    ),
    // θ = 2 arctan(sine / (|u| |v| + |uv|)), or what is left to π beyond a right angle.
    ...bend.set(divide(sine.get, add(multiply(rij.get, rkj.get), f64x2.absolute(uv.get)))),
    ...arcTangent(frame, bend),
    ...bend.set(add(bend.get, bend.get)),
    ...bend.set(
      f64x2.whereLess(uv.get, constant(0), subtract(constant(Math.PI), bend.get), bend.get),
    ),
    ...bend.set(subtract(bend.get, recordValue(scene, 32))),
    ...stiff.set(multiply(recordValue(scene, 48), bend.get)),
    // The lengths now stand for their changes.
    ...stretch.set(
      add(
        multiply(couplingIJ, subtract(rij.get, recordValue(scene, 64))),
        multiply(couplingKJ, subtract(rkj.get, recordValue(scene, 80))),
      ),
    ),
    ...energy.set(
      sum(
        energy.get,
        product(constant(0.5), stiff.get, bend.get, cubic(1)),
        multiply(stretch.get, bend.get),
      ),
    ),
    ...slope.set(divide(add(multiply(stiff.get, cubic(1.5)), stretch.get), sine.get)),
    ...uv.set(multiply(uv.get, slope.get)),
    ...uu.set(divide(add(uv.get, product(couplingIJ, bend.get, rij.get)), uu.get)),
    ...vv.set(divide(add(uv.get, product(couplingKJ, bend.get, rkj.get)), vv.get)),
    ...setVector(f, scaledDifference(uu, u, slope.get, v)),
    ...setVector(g, scaledDifference(vv, v, slope.get, u)),
    ...addToGradient(scene, i, f),
    ...addToGradient(scene, k, g),
    ...setVector(f, (axis) => subtract(subtract(constant(0), f[axis].get), g[axis].get)),
    ...addToGradient(scene, j, f),
  ];

  function cubic(factor: number): Code {
    return add(constant(1), multiply(constant(factor * CUBIC_BEND), bend.get));
  }
}

/** Two out-of-plane angles: atoms i, j, k, l; then 143.9325 times the force constant. */
export function outOfPlanePart(scene: Scene): Code {
  const { frame, energy } = scene;
  const { atoms, code } = recordAtoms(scene, 4);
  const [i, j, k, l] = atoms;
  const [u, v, w, n, p, f, g] = Array.from({ length: 7 }, () => vector(frame));
  const [nn, ww, height, square, level, chi, slope, tilt] = lanes(frame, 8);
  return [
    ...code,
    ...setVector(u, between(scene, j, i)),
    ...setVector(v, between(scene, j, k)),
    ...setVector(w, between(scene, j, l)),
    ...setVector(n, crossProduct(u, v)),
    ...nn.set(dotProduct(n, n)),
    ...ww.set(dotProduct(w, w)),
    ...height.set(dotProduct(n, w)),
    ...square.set(add(multiply(nn.get, ww.get), constant(COLLINEAR_GUARD))),
    ...level.set(subtract(square.get, multiply(height.get, height.get))),
    ...level.set(squareRoot(largest(level.get, constant(COLLINEAR_GUARD)))),
    ...chi.set(divide(height.get, add(squareRoot(square.get), level.get))),
    ...arcTangent(frame, chi),
    ...chi.set(add(chi.get, chi.get)),
    ...slope.set(multiply(recordValue(scene, 32), chi.get)),
    ...energy.set(add(energy.get, product(constant(0.5), slope.get, chi.get))),
    ...slope.set(divide(slope.get, level.get)),
    ...tilt.set(divide(multiply(slope.get, height.get), square.get)),
    ...setVector(p, scaledDifference(slope, w, multiply(tilt.get, ww.get), n)),
    ...setVector(f, crossProduct(v, p)),
    ...setVector(g, crossProduct(p, u)),
    ...setVector(p, scaledDifference(slope, n, multiply(tilt.get, nn.get), w)),
    ...addToGradient(scene, i, f),
    ...addToGradient(scene, k, g),
    ...addToGradient(scene, l, p),
    ...setVector(f, (axis) => subtract(constant(0), sum(f[axis].get, g[axis].get, p[axis].get))),
    ...addToGradient(scene, j, f),
  ];
}

/** Two torsions: atoms i, j, k, l; then half of V1, V2 and V3. */
export function torsionPart(scene: Scene): Code {
  const { frame, energy } = scene;
  const { atoms, code } = recordAtoms(scene, 4);
  const [i, j, k, l] = atoms;
  const [a, b, d, m, n, p, r] = Array.from({ length: 7 }, () => vector(frame));
  const [mm, nn, inverse, c, slope, tilt] = lanes(frame, 6);
  const [v1, v2, v3] = [32, 48, 64].map((offset) => recordValue(scene, offset));
  const cc = multiply(c.get, c.get);
  return [
    ...code,
    ...setVector(a, between(scene, i, j)),
    ...setVector(b, between(scene, j, k)),
    ...setVector(d, between(scene, k, l)),
    ...setVector(m, crossProduct(a, b)),
    ...setVector(n, crossProduct(b, d)),
    ...mm.set(dotProduct(m, m)),
    ...nn.set(dotProduct(n, n)),
    ...inverse.set(
      divide(constant(1), squareRoot(add(multiply(mm.get, nn.get), constant(COLLINEAR_GUARD)))),
    ),
    ...c.set(multiply(dotProduct(m, n), inverse.get)),
    ...energy.set(
      sum(
        energy.get,
        multiply(v1, add(constant(1), c.get)),
        multiply(v2, subtract(constant(2), multiply(constant(2), cc))),
        multiply(
          v3,
          add(constant(1), multiply(c.get, subtract(multiply(constant(4), cc), constant(3)))),
        ),
      ),
    ),
    ...slope.set(
      add(
        subtract(v1, product(constant(4), v2, c.get)),
        multiply(v3, subtract(multiply(constant(12), cc), constant(3))),
      ),
    ),
    ...slope.set(multiply(slope.get, inverse.get)),
    ...tilt.set(product(slope.get, c.get, inverse.get)),
    ...setVector(p, scaledDifference(slope, n, multiply(tilt.get, nn.get), m)),
    ...setVector(r, scaledDifference(slope, m, multiply(tilt.get, mm.get), n)),
    // The normals' places now take the derivatives by the bond vectors a, b and d.
    ...setVector(m, crossProduct(b, p)),
    ...setVector(n, crossProduct(r, b)),
    ...setVector(b, (axis) => add(crossProduct(p, a)(axis), crossProduct(d, r)(axis))),
    ...setVector(a, (axis) => subtract(constant(0), m[axis].get)),
    ...addToGradient(scene, i, a),
    ...setVector(a, (axis) => subtract(m[axis].get, b[axis].get)),
    ...addToGradient(scene, j, a),
    ...setVector(a, (axis) => subtract(b[axis].get, n[axis].get)),
    ...addToGradient(scene, k, a),
    ...addToGradient(scene, l, n),
  ];
}
