/** A push along the soft directions of a molecule: what sits on a saddle by symmetry would otherwise stay there. */
import type { CurvatureTerm } from '../energy-term';
import { createPreconditioner } from '../minimizer/preconditioner';
import { orthonormalize, rigidMotions } from '../minimizer/rigid-motions';
import { createRandom } from '../random';

/** How far the fastest atom goes, Å. */
const LONGEST_MOVE = 0.3;

/**
 * Creates the function that pushes copies of a geometry (Å, 3N) one way and the other along a direction without any symmetry,
 * weighed by the inverse curvature so that no bond is stretched much.
 */
export function createSoftKick(
  curvature: CurvatureTerm,
  size: number,
  seed: number,
): (x: Float64Array) => Float64Array[] {
  const preconditioner = createPreconditioner(size);
  return (x) => {
    const random = createRandom(seed);
    const direction = Float64Array.from({ length: size }, () => random.normal());
    const rigid = rigidMotions(x);
    preconditioner.refresh(x, curvature);
    orthonormalize(direction, rigid);
    preconditioner.solve(direction);
    orthonormalize(direction, rigid);
    let longest = 0;
    for (let a = 0; a < size; a += 3) {
      longest = Math.max(longest, Math.hypot(direction[a], direction[a + 1], direction[a + 2]));
    }
    return [LONGEST_MOVE, -LONGEST_MOVE].map((move) =>
      x.map((value, a) => value + (move * direction[a]) / longest),
    );
  };
}
