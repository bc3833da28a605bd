/** Takes atoms apart that lie on top of each other: by symmetry no gradient would ever do it. */

/** Two atoms closer than this have no direction to go apart, Å. */
const COINCIDENT = 0.01;
/** How far the later one is moved, Å. */
const MOVE = 0.1;
/** The turn between neighboring directions that covers a sphere evenly, radians. */
const GOLDEN_ANGLE = Math.PI * (3 - Math.sqrt(5));

/** Moves, in place, every atom of `x` (Å, 3N) that lies on an earlier one, each in its own direction. */
export function separateCoincident(x: Float64Array): void {
  for (let i = 3; i < x.length; i += 3) {
    for (let j = 0; j < i; j += 3) {
      const dx = x[i] - x[j];
      const dy = x[i + 1] - x[j + 1];
      const dz = x[i + 2] - x[j + 2];
      if (dx * dx + dy * dy + dz * dz >= COINCIDENT * COINCIDENT) continue;
      const height = 1 - (2 * (i / 3) + 1) / (x.length / 3 + 1);
      const width = Math.sqrt(1 - height * height);
      const turn = (GOLDEN_ANGLE * i) / 3;
      x[i] += MOVE * width * Math.cos(turn);
      x[i + 1] += MOVE * width * Math.sin(turn);
      x[i + 2] += MOVE * height;
      break;
    }
  }
}
