/** The energy of a molecule computed by the WebAssembly program. */
import type { EnergyTerm } from '../../energy-term';
import type { Dielectric } from '../forcefield';
import type { Interactions } from '../interactions';
import { energyProgram } from './energy-program';
import { layOutRecords } from './records';

type Run = (lastRow: number, stride: number, records: number, ...ends: number[]) => number;

/** One function and one memory serve every force field; the memory holds the records of the one used last. */
interface Machine {
  readonly memory: WebAssembly.Memory;
  readonly run: Run;
  numbers: Float64Array;
  owner: Float64Array | null;
}

const BYTES_PER_PAGE = 65536;
const machines = new Map<boolean, Machine>();

/** The whole energy but for linear angles, kcal/mol. */
export function compiledEnergy(
  atomCount: number,
  interactions: Interactions,
  dielectric: Dielectric,
): EnergyTerm {
  // A single atom has no interaction, and the program's loops run at least once.
  if (atomCount < 2) return () => 0;
  const machine = machineFor(dielectric.distanceDependent);
  const records = layOutRecords(atomCount, interactions, dielectric);
  // One more atom in a column for the partner beyond the end.
  const stride = atomCount + 1;
  const start = 6 * stride;
  const [bonds, angles, outOfPlanes, torsions] = records.ends.map((end) => 8 * start + end);
  return (x, gradient) => {
    if (machine.owner !== records.numbers) load(machine, records.numbers, start);
    const { numbers } = machine;
    for (let a = 0, n = 0; a < atomCount; a++, n += 3) {
      numbers[a] = x[n];
      numbers[stride + a] = x[n + 1];
      numbers[2 * stride + a] = x[n + 2];
    }
    numbers.fill(0, 3 * stride, start);
    const energy = machine.run(
      8 * (atomCount - 1),
      8 * stride,
      8 * start,
      bonds,
      angles,
      outOfPlanes,
      torsions,
    );
    for (let a = 0, n = 0; a < atomCount; a++, n += 3) {
      gradient[n] += numbers[3 * stride + a];
      gradient[n + 1] += numbers[4 * stride + a];
      gradient[n + 2] += numbers[5 * stride + a];
    }
    return energy;
  };
}

function machineFor(distanceDependent: boolean): Machine {
  const known = machines.get(distanceDependent);
  if (known) return known;
  const memory = new WebAssembly.Memory({ initial: 1 });
  const module = new WebAssembly.Module(energyProgram(distanceDependent));
  const { run } = new WebAssembly.Instance(module, { engine: { memory } }).exports;
  const numbers = new Float64Array(memory.buffer);
  const machine = { memory, run: run as Run, numbers, owner: null };
  machines.set(distanceDependent, machine);
  return machine;
}

/** Puts a force field's records into the machine's memory, which grows when it must. */
function load(machine: Machine, records: Float64Array, start: number): void {
  const missing = 8 * (start + records.length) - machine.memory.buffer.byteLength;
  if (missing > 0) {
    machine.memory.grow(Math.ceil(missing / BYTES_PER_PAGE));
    machine.numbers = new Float64Array(machine.memory.buffer);
  }
  // The place beyond the last atom of each column must be finite.
  machine.numbers.fill(0, 0, start);
  machine.numbers.set(records, start);
  machine.owner = records;
}
