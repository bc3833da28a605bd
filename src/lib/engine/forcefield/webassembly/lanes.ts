/** Vectors of two lanes: two interactions computed side by side, each lane one of them. */
import { f64, f64x2, i32, valueType } from './assembler';
import type { Code, Frame, Local } from './assembler';

/** What every part of the energy program shares. */
export interface Scene {
  readonly frame: Frame;
  /** Addresses of x, y, z and of the gradient's x, y, z: one number an atom. */
  readonly columns: readonly Local[];
  /** Address of the record at hand. */
  readonly record: Local;
  /** Sum of energies, by lanes. */
  readonly energy: Local;
}

/** Three coordinates, two lanes each. */
export type Vector = readonly [Local, Local, Local];
/** A vector as expressions: the code of one axis, 0 to 2. */
export type VectorCode = (axis: number) => Code;
/** The byte offsets of an atom of each lane within the columns. */
export type AtomPair = readonly [Local, Local];

const { add, subtract, multiply } = f64x2;

/** a + b + c + … */
export const sum = (first: Code, ...others: readonly Code[]): Code => others.reduce(add, first);
/** a · b · c · … */
export const product = (first: Code, ...others: readonly Code[]): Code =>
  others.reduce(multiply, first);

/** Fresh locals of two lanes. */
export function lanes(frame: Frame, count: number): Local[] {
  return Array.from({ length: count }, () => frame.local(valueType.v128));
}

/** A fresh vector. */
export function vector(frame: Frame): Vector {
  return [frame.local(valueType.v128), frame.local(valueType.v128), frame.local(valueType.v128)];
}

/** Writes a vector. */
export function setVector(target: Vector, value: VectorCode): Code {
  return target.flatMap((local, axis) => local.set(value(axis)));
}

/** Inner product. */
export function dotProduct(a: Vector, b: Vector): Code {
  return sum(
    multiply(a[0].get, b[0].get),
    multiply(a[1].get, b[1].get),
    multiply(a[2].get, b[2].get),
  );
}

/** Cross product a × b. */
export function crossProduct(a: Vector, b: Vector): VectorCode {
  return (axis) => {
    const [p, q] = [(axis + 1) % 3, (axis + 2) % 3];
    return subtract(multiply(a[p].get, b[q].get), multiply(a[q].get, b[p].get));
  };
}

/** s · a - t · b. */
export function scaledDifference(s: Local, a: Vector, t: Code, b: Vector): VectorCode {
  return (axis) => subtract(multiply(s.get, a[axis].get), multiply(t, b[axis].get));
}

/** Two constants of the record: one a lane. */
export function recordValue(scene: Scene, offset: number): Code {
  return f64x2.load(scene.record.get, offset);
}

/** Reads the offsets of a record's first `count` atoms, two lanes each. */
export function recordAtoms(scene: Scene, count: number): { atoms: AtomPair[]; code: Code } {
  const { frame, record } = scene;
  const atoms = Array.from({ length: count }, (): AtomPair => [
    frame.local(valueType.i32),
    frame.local(valueType.i32),
  ]);
  const code = atoms.flatMap((lanesOfAtom, n) =>
    lanesOfAtom.flatMap((local, lane) => local.set(i32.load(record.get, 8 * n + 4 * lane))),
  );
  return { atoms, code };
}

/** The vector from atom `from` to atom `to`. */
export function between(scene: Scene, from: AtomPair, to: AtomPair): VectorCode {
  const position = (atom: AtomPair, axis: number): Code =>
    f64x2.gather(...addresses(scene, atom, axis));
  return (axis) => subtract(position(to, axis), position(from, axis));
}

/** Adds a vector to the gradient at an atom; the lanes one after the other, for they may be the same atom. */
export function addToGradient(scene: Scene, atom: AtomPair, value: Vector): Code {
  return value.flatMap((local, axis) =>
    addresses(scene, atom, axis + 3).flatMap((address, lane) =>
      f64.store(address, f64.add(f64.load(address), f64x2.lane(local.get, lane))),
    ),
  );
}

function addresses({ columns }: Scene, [first, second]: AtomPair, column: number): [Code, Code] {
  return [i32.add(first.get, columns[column].get), i32.add(second.get, columns[column].get)];
}

/** Terms of the arc tangent's series: enough for |u| ≤ tan(π/16), where the next one is below rounding. */
const SERIES_TERMS = 12;

/** Replaces `t`, between -1 and 1, by its arc tangent: halves the angle twice, then takes the power series. */
export function arcTangent(frame: Frame, t: Local): Code {
  const square = frame.local(valueType.v128);
  const { constant, divide, squareRoot } = f64x2;
  const halve = t.set(
    divide(t.get, add(constant(1), squareRoot(add(constant(1), multiply(t.get, t.get))))),
  );
  let series = constant(1 / (2 * SERIES_TERMS - 1));
  for (let n = SERIES_TERMS - 2; n >= 0; n--) {
    series = subtract(constant(1 / (2 * n + 1)), multiply(square.get, series));
  }
  return [
    ...halve,
    ...halve,
    ...square.set(multiply(t.get, t.get)),
    ...t.set(product(constant(4), t.get, series)),
  ];
}
