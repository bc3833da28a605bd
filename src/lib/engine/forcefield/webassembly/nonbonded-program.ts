/**
 * The nonbonded energy (formulas in terms/van-der-waals.ts and terms/electrostatic.ts) as a WebAssembly function that
 * takes two pairs at a time.
 *
 * Memory: six columns of `stride` bytes (x, y, z and the gradient's x, y, z; one number an atom), then the stream of
 * pair constants. Atom i meets i+1, i+2, … two by two; each meeting of two takes 64 bytes of the stream: twice 0.07 R*,
 * 0.12 R*⁷, ε (1.07 R*)⁷ and 332.0716 q q / D. A last partner beyond the end has zeros for energies.
 */
import { BUFFER } from '../terms/electrostatic';
import { COINCIDENT_GUARD } from '../terms/constants';
import { assembleModule, f64, f64x2, i32, repeatWhile, valueType } from './assembler';
import type { Code, Frame, Local } from './assembler';

/** Bytes of the constants of two pairs. */
export const BYTES_PER_MEETING = 64;

const { add, subtract, multiply, divide, squareRoot, constant } = f64x2;

/**
 * Assembles the function `run(rows, stride, stream)`: `rows` are the bytes of all coordinates' first column but the
 * last atom's, `stream` is where the constants begin. Adds to the gradient columns and returns the energy.
 */
export function nonbondedProgram(distanceDependent: boolean): Uint8Array<ArrayBuffer> {
  return assembleModule(valueType.f64, (frame) => {
    const rows = frame.parameter(valueType.i32);
    const stride = frame.parameter(valueType.i32);
    const stream = frame.parameter(valueType.i32);
    const columns = columnAddresses(frame, stride);
    const i = frame.local(valueType.i32);
    const j = frame.local(valueType.i32);
    const [xi, yi, zi, gx, gy, gz, energy] = vectors(frame, 7);
    const pair = pairCode(frame, distanceDependent, stream, energy, columns, j, [
      [xi, gx],
      [yi, gy],
      [zi, gz],
    ]);
    const zero = constant(0);
    const row: Code = [
      ...xi.set(f64x2.loadSplat(i.get)),
      ...yi.set(f64x2.loadSplat(i32.add(i.get, columns[1].get))),
      ...zi.set(f64x2.loadSplat(i32.add(i.get, columns[2].get))),
      ...[gx, gy, gz].flatMap((sum) => sum.set(zero)),
      ...j.set(i32.add(i.get, i32.constant(8))),
      ...repeatWhile(
        [
          ...pair,
          ...stream.set(i32.add(stream.get, i32.constant(BYTES_PER_MEETING))),
          ...j.set(i32.add(j.get, i32.constant(16))),
        ],
        i32.lessThan(j.get, i32.add(rows.get, i32.constant(8))),
      ),
      ...[gx, gy, gz].flatMap((sum, axis) => {
        const address = i32.add(i.get, columns[3 + axis].get);
        return f64.store(address, f64.add(f64.load(address), laneSum(sum)));
      }),
      ...i.set(i32.add(i.get, i32.constant(8))),
    ];
    return [
      ...setColumns(columns, stride),
      ...repeatWhile(row, i32.lessThan(i.get, rows.get)),
      ...laneSum(energy),
    ];
  });
}

function vectors(frame: Frame, count: number): Local[] {
  return Array.from({ length: count }, () => frame.local(valueType.v128));
}

/** Locals for the addresses of the six columns. */
function columnAddresses(frame: Frame, _stride: Local): Local[] {
  return Array.from({ length: 6 }, () => frame.local(valueType.i32));
}

function setColumns(columns: readonly Local[], stride: Local): Code {
  return columns.slice(1).flatMap((column, n) => column.set(i32.add(columns[n].get, stride.get)));
}

function laneSum(sum: Local): Code {
  return f64.add(f64x2.lane(sum.get, 0), f64x2.lane(sum.get, 1));
}

/** Energy and forces of atom i with the two atoms at j. `axes` are i's coordinates with the sums of its gradient. */
function pairCode(
  frame: Frame,
  distanceDependent: boolean,
  stream: Local,
  energy: Local,
  columns: readonly Local[],
  j: Local,
  axes: readonly (readonly [Local, Local])[],
): Code {
  const differences = vectors(frame, 3);
  const [squared, r, r6, shifted, buffered, screened] = vectors(frame, 6);
  const [vdwProduct, coulombProduct, inverse, a, b, c, ratio, bracket, envelope, charge, slope] =
    vectors(frame, 11);
  const addresses = columns.map((column, n) => (n === 0 ? j.get : i32.add(j.get, column.get)));
  const shift = f64x2.load(stream.get, 0);
  const buffer = f64x2.load(stream.get, 16);
  const square = (x: Local): Code => multiply(x.get, x.get);
  const [dx, dy, dz] = differences;
  return [
    ...differences.flatMap((d, axis) =>
      d.set(subtract(axes[axis][0].get, f64x2.load(addresses[axis]))),
    ),
    ...squared.set(add(add(add(square(dx), constant(COINCIDENT_GUARD)), square(dy)), square(dz))),
    ...r.set(squareRoot(squared.get)),
    ...r6.set(multiply(square(squared), squared.get)),
    // One division serves four inverses: 1/(R + 0.07 R*), 1/(R⁷ + 0.12 R*⁷), 1/(R + 0.05) and 1/R.
    ...shifted.set(add(r.get, shift)),
    ...buffered.set(add(multiply(r6.get, r.get), buffer)),
    ...screened.set(add(r.get, constant(BUFFER))),
    ...vdwProduct.set(multiply(shifted.get, buffered.get)),
    ...coulombProduct.set(multiply(screened.get, r.get)),
    ...inverse.set(divide(constant(1), multiply(vdwProduct.get, coulombProduct.get))),
    ...coulombProduct.set(multiply(coulombProduct.get, inverse.get)),
    ...inverse.set(multiply(vdwProduct.get, inverse.get)),
    ...a.set(multiply(coulombProduct.get, buffered.get)),
    ...b.set(multiply(coulombProduct.get, shifted.get)),
    ...c.set(multiply(inverse.get, r.get)),
    // envelope = ε (1.07 R* a)⁷; ratio = 1.12 R*⁷ b; EvdW = envelope (ratio - 2).
    ...envelope.set(multiply(square(a), a.get)),
    ...envelope.set(multiply(multiply(square(envelope), a.get), f64x2.load(stream.get, 32))),
    ...ratio.set(multiply(multiply(buffer, b.get), constant(1.12 / 0.12))),
    ...bracket.set(subtract(ratio.get, constant(2))),
    ...charge.set(multiply(f64x2.load(stream.get, 48), c.get)),
    ...(distanceDependent ? charge.set(multiply(charge.get, c.get)) : []),
    ...energy.set(add(add(energy.get, multiply(envelope.get, bracket.get)), charge.get)),
    // -dE/dR = 7 envelope (a bracket + ratio b R⁶) + n EQ c, over R.
    ...slope.set(add(multiply(a.get, bracket.get), multiply(multiply(ratio.get, b.get), r6.get))),
    ...slope.set(multiply(multiply(envelope.get, constant(7)), slope.get)),
    ...slope.set(
      add(slope.get, multiply(distanceDependent ? add(charge.get, charge.get) : charge.get, c.get)),
    ),
    ...slope.set(multiply(slope.get, multiply(inverse.get, screened.get))),
    ...differences.flatMap((d, axis) => {
      const sum = axes[axis][1];
      const address = addresses[3 + axis];
      return [
        ...d.set(multiply(d.get, slope.get)),
        ...sum.set(subtract(sum.get, d.get)),
        ...f64x2.store(address, add(f64x2.load(address), d.get)),
      ];
    }),
  ];
}
