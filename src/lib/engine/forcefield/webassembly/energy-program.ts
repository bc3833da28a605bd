/** The whole energy as one WebAssembly function. */
import { assembleModule, f64, f64x2, i32, repeatWhile, valueType, when } from './assembler';
import type { Code } from './assembler';
import { anglePart, bondPart, outOfPlanePart, torsionPart } from './bonded-parts';
import type { Scene } from './lanes';
import { nonbondedPart } from './nonbonded-part';

/** The bonded parts in the order of their records, with the bytes of a record of two interactions. */
export const bondedParts = {
  bonds: { bytes: 48, part: bondPart },
  angles: { bytes: 128, part: anglePart },
  outOfPlanes: { bytes: 48, part: outOfPlanePart },
  torsions: { bytes: 80, part: torsionPart },
} as const;

/**
 * Assembles `run(lastRow, stride, records, endOfBonds, endOfAngles, endOfOutOfPlanes, endOfTorsions)`. Memory begins with
 * six columns of `stride` bytes: x, y, z and the gradient's x, y, z, one number an atom. The records of bonds start at
 * `records`; each kind of record follows the one before, the nonbonded ones last. `lastRow` is the byte offset of
 * the last atom. Adds to the gradient and returns the energy.
 */
export function energyProgram(distanceDependent: boolean): Uint8Array<ArrayBuffer> {
  return assembleModule(valueType.f64, (frame) => {
    const lastRow = frame.parameter(valueType.i32);
    const stride = frame.parameter(valueType.i32);
    const record = frame.parameter(valueType.i32);
    const ends = Object.keys(bondedParts).map(() => frame.parameter(valueType.i32));
    const columns = Array.from({ length: 6 }, () => frame.local(valueType.i32));
    const energy = frame.local(valueType.v128);
    const scene: Scene = { frame, columns, record, energy };
    const bonded = Object.values(bondedParts).flatMap(({ bytes, part }, n): Code => {
      const more = i32.lessThan(record.get, ends[n].get);
      const body = [...part(scene), ...record.set(i32.add(record.get, i32.constant(bytes)))];
      return when(more, repeatWhile(body, more));
    });
    return [
      ...columns.slice(1).flatMap((column, n) => column.set(i32.add(columns[n].get, stride.get))),
      ...bonded,
      ...nonbondedPart(scene, lastRow, distanceDependent),
      ...f64.add(f64x2.lane(energy.get, 0), f64x2.lane(energy.get, 1)),
    ];
  });
}
