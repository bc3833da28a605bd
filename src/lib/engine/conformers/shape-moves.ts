/** Everything that can be done to a geometry to make another conformer of it. */
import { torsion } from '../geometry';
import type { Molecule } from '../molecule/molecule';
import type { Random } from '../random';
import { turnBetween } from '../units';
import type { Drive } from './drives';
import { findDrives, setTorsion } from './drives';
import type { Inversion } from './inversions';
import { findInversions, invert } from './inversions';
import type { RingMove } from './ring-moves';
import { findRingMoves, flap, turnArc } from './ring-moves';

export interface ShapeMoves {
  readonly drives: readonly Drive[];
  readonly ringMoves: readonly RingMove[];
  readonly inversions: readonly Inversion[];
}

/** Finds the moves of a molecule. */
export function findShapeMoves(molecule: Molecule, classes: ArrayLike<number>): ShapeMoves {
  return {
    drives: findDrives(molecule, classes),
    ringMoves: findRingMoves(molecule),
    inversions: findInversions(molecule, classes),
  };
}

/** How far from its choice a torsion is set, degrees: symmetric starts would end on saddles. */
const TORSION_SPREAD = 15;
/** A choice as near to the present torsion as this is no move, degrees. */
const NO_MOVE = 40;
/** Most moves made at once. */
const MOST_MOVES = 5;

/** Sets a drive near one of its choices, in place. */
export function driveNear(x: Float64Array, drive: Drive, angle: number, random: Random): void {
  setTorsion(x, drive, angle + TORSION_SPREAD * (2 * random.uniform() - 1));
}

/** Makes one to five moves, one or two mostly, in place. */
export function kick(x: Float64Array, moves: ShapeMoves, random: Random): void {
  const { drives, ringMoves, inversions } = moves;
  // Rings have many equivalent moves; as a whole they weigh as much as a few bonds do.
  const ringWeight = Math.min(ringMoves.length, 2 + Math.ceil(ringMoves.length / 4));
  const total = drives.length + ringWeight + inversions.length;
  let count = 1;
  while (count < MOST_MOVES && random.uniform() < 0.5) count++;
  for (let move = 0; move < count; move++) {
    const choice = random.below(total);
    if (choice < drives.length) {
      kickDrive(x, drives[choice], random);
    } else if (choice < drives.length + inversions.length) {
      invert(x, inversions[choice - drives.length]);
    } else {
      kickRing(x, ringMoves[random.below(ringMoves.length)], random);
    }
  }
}

function kickDrive(x: Float64Array, drive: Drive, random: Random): void {
  const now = torsion(x, ...drive.atoms);
  const others = drive.angles.filter((angle) => Math.abs(turnBetween(now, angle)) > NO_MOVE);
  const choices = others.length > 0 ? others : drive.angles;
  driveNear(x, drive, choices[random.below(choices.length)], random);
}

function kickRing(x: Float64Array, move: RingMove, random: Random): void {
  if (move.arc.length === 1 || random.uniform() < 0.5) flap(x, move);
  else turnArc(x, move, (random.uniform() < 0.5 ? 1 : -1) * (40 + 100 * random.uniform()));
}
