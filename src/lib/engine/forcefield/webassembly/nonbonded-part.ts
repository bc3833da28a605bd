/**
 * The nonbonded energy (formulas in terms/van-der-waals.ts and terms/electrostatic.ts), two pairs at a time. Atom i meets
 * i+1, i+2, … two by two; each meeting of two takes a record: twice 0.07 R*, 0.12 R*⁷, ε (1.07 R*)⁷ and 332.0716 q q / D.
 * Excluded pairs, and a last partner beyond the end, have zeros for energies.
 */
import { BUFFER } from '../terms/electrostatic';
import { COINCIDENT_GUARD } from '../terms/constants';
import { f64, f64x2, i32, repeatWhile, valueType } from './assembler';
import type { Code, Local } from './assembler';
import { lanes, product, recordValue, setVector, sum, vector } from './lanes';
import type { Scene, Vector } from './lanes';

/** Bytes of a record. */
export const NONBONDED_BYTES = 64;

const { add, subtract, multiply, divide, squareRoot, constant } = f64x2;

/** All pairs; `lastRow` is the byte offset of the last atom, whose row is empty. */
export function nonbondedPart(scene: Scene, lastRow: Local, distanceDependent: boolean): Code {
  const { frame, columns, record } = scene;
  const [i, j] = [frame.local(valueType.i32), frame.local(valueType.i32)];
  const [place, onI] = [vector(frame), vector(frame)];
  const row: Code = [
    ...setVector(place, (axis) => f64x2.loadSplat(i32.add(i.get, columns[axis].get))),
    ...setVector(onI, () => constant(0)),
    ...j.set(i32.add(i.get, i32.constant(8))),
    ...repeatWhile(
      [
        ...meeting(scene, place, onI, j, distanceDependent),
        ...record.set(i32.add(record.get, i32.constant(NONBONDED_BYTES))),
        ...j.set(i32.add(j.get, i32.constant(16))),
      ],
      i32.lessThan(j.get, i32.add(lastRow.get, i32.constant(8))),
    ),
    ...onI.flatMap((local, axis) => {
      const address = i32.add(i.get, columns[3 + axis].get);
      const both = f64.add(f64x2.lane(local.get, 0), f64x2.lane(local.get, 1));
      return f64.store(address, f64.add(f64.load(address), both));
    }),
    ...i.set(i32.add(i.get, i32.constant(8))),
  ];
  return [...i.set(i32.constant(0)), ...repeatWhile(row, i32.lessThan(i.get, lastRow.get))];
}

/** Energy and gradient of the atom at `place` with the two atoms at j. */
function meeting(
  scene: Scene,
  place: Vector,
  onI: Vector,
  j: Local,
  distanceDependent: boolean,
): Code {
  const { frame, columns, energy } = scene;
  const d = vector(frame);
  const [squared, r, r6, shifted, buffered, screened] = lanes(frame, 6);
  const [vdwProduct, coulombProduct, a, b, c, ratio, envelope, charge, slope] = lanes(frame, 9);
  const address = (column: number): Code => i32.add(j.get, columns[column].get);
  const square = (x: Local): Code => multiply(x.get, x.get);
  const bracket = subtract(ratio.get, constant(2));
  const [dx, dy, dz] = d;
  return [
    ...setVector(d, (axis) => subtract(place[axis].get, f64x2.load(address(axis)))),
    ...squared.set(sum(square(dx), constant(COINCIDENT_GUARD), square(dy), square(dz))),
    ...r.set(squareRoot(squared.get)),
    ...r6.set(product(squared.get, squared.get, squared.get)),
    // One division serves four inverses: 1/(R + 0.07 R*), 1/(R⁷ + 0.12 R*⁷), 1/(R + 0.05) and 1/R.
    ...shifted.set(add(r.get, recordValue(scene, 0))),
    ...buffered.set(add(multiply(r6.get, r.get), recordValue(scene, 16))),
    ...screened.set(add(r.get, constant(BUFFER))),
    ...vdwProduct.set(multiply(shifted.get, buffered.get)),
    ...coulombProduct.set(multiply(screened.get, r.get)),
    ...c.set(divide(constant(1), multiply(vdwProduct.get, coulombProduct.get))),
    ...coulombProduct.set(multiply(coulombProduct.get, c.get)),
    ...vdwProduct.set(multiply(vdwProduct.get, c.get)),
    ...a.set(multiply(coulombProduct.get, buffered.get)),
    ...b.set(multiply(coulombProduct.get, shifted.get)),
    ...c.set(multiply(vdwProduct.get, r.get)),
    // envelope = ε (1.07 R* a)⁷; ratio = 1.12 R*⁷ b; EvdW = envelope (ratio - 2).
    ...envelope.set(product(a.get, a.get, a.get)),
    ...envelope.set(product(envelope.get, envelope.get, a.get, recordValue(scene, 32))),
    ...ratio.set(product(recordValue(scene, 16), b.get, constant(1.12 / 0.12))),
    ...charge.set(product(recordValue(scene, 48), c.get, ...(distanceDependent ? [c.get] : []))),
    ...energy.set(sum(energy.get, multiply(envelope.get, bracket), charge.get)),
    // -dE/dR = 7 envelope (a bracket + ratio b R⁶) + n EQ c, over R.
    ...slope.set(add(multiply(a.get, bracket), product(ratio.get, b.get, r6.get))),
    ...slope.set(product(envelope.get, constant(7), slope.get)),
    ...charge.set(distanceDependent ? add(charge.get, charge.get) : charge.get),
    ...slope.set(add(slope.get, multiply(charge.get, c.get))),
    ...slope.set(product(vdwProduct.get, screened.get, slope.get)),
    ...setVector(d, (axis) => multiply(d[axis].get, slope.get)),
    ...setVector(onI, (axis) => subtract(onI[axis].get, d[axis].get)),
    ...d.flatMap((local, axis) =>
      f64x2.store(address(3 + axis), add(f64x2.load(address(3 + axis)), local.get)),
    ),
  ];
}
