/**
 * Van der Waals and electrostatic energy in one pass over all pairs, the fast version of terms/van-der-waals.ts and
 * terms/electrostatic.ts. Excluded pairs take part with zero energies: the dense order needs no index lists.
 */
import type { EnergyTerm } from '../../energy-term';
import type { Dielectric } from '../forcefield';
import type { Interactions } from '../interactions';
import { BYTES_PER_MEETING, nonbondedProgram } from '../webassembly/nonbonded-program';
import { COULOMB } from './electrostatic';

const NUMBERS_PER_MEETING = BYTES_PER_MEETING / 8;
const BYTES_PER_PAGE = 65536;

type Run = (rows: number, stride: number, stream: number) => number;

/** One function and one memory serve every force field; the memory holds the constants of the one used last. */
interface Machine {
  readonly memory: WebAssembly.Memory;
  readonly run: Run;
  numbers: Float64Array;
  owner: Float64Array | null;
}

const machines = new Map<boolean, Machine>();

/** The energy of all nonbonded pairs of `atomCount` atoms, kcal/mol. */
export function nonbondedTerm(
  atomCount: number,
  { vanDerWaals, electrostatics }: Pick<Interactions, 'vanDerWaals' | 'electrostatics'>,
  dielectric: Dielectric,
): EnergyTerm {
  if (atomCount < 2) return () => 0;
  const machine = machineFor(dielectric.distanceDependent);
  const stream = pairStream(atomCount, vanDerWaals, electrostatics, dielectric.constant);
  // One more column entry for the partner beyond the end.
  const stride = atomCount + 2;
  const streamStart = 6 * stride;
  return (x, gradient) => {
    if (machine.owner !== stream) load(machine, stream, stride);
    const { numbers } = machine;
    for (let a = 0, n = 0; a < atomCount; a++, n += 3) {
      numbers[a] = x[n];
      numbers[stride + a] = x[n + 1];
      numbers[2 * stride + a] = x[n + 2];
    }
    numbers.fill(0, 3 * stride, streamStart);
    const energy = machine.run(8 * (atomCount - 1), 8 * stride, 8 * streamStart);
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
  const module = new WebAssembly.Module(nonbondedProgram(distanceDependent));
  const { run } = new WebAssembly.Instance(module, { engine: { memory } }).exports;
  const machine = {
    memory,
    run: run as Run,
    numbers: new Float64Array(memory.buffer),
    owner: null,
  };
  machines.set(distanceDependent, machine);
  return machine;
}

/** Puts a force field's constants into the machine's memory, which grows when it must. */
function load(machine: Machine, stream: Float64Array, stride: number): void {
  const missing = 8 * (6 * stride + stream.length) - machine.memory.buffer.byteLength;
  if (missing > 0) {
    machine.memory.grow(Math.ceil(missing / BYTES_PER_PAGE));
    machine.numbers = new Float64Array(machine.memory.buffer);
  }
  machine.numbers.fill(0, 0, 6 * stride);
  machine.numbers.set(stream, 6 * stride);
  machine.owner = stream;
}

/** The constants of all pairs in the order in which the program meets them. */
function pairStream(
  atomCount: number,
  { atoms, radius, depth }: Interactions['vanDerWaals'],
  { atoms: chargedAtoms, chargeProduct }: Interactions['electrostatics'],
  dielectricConstant: number,
): Float64Array {
  const rowStarts = new Int32Array(atomCount);
  for (let i = 1; i < atomCount; i++) rowStarts[i] = rowStarts[i - 1] + ((atomCount - i + 1) >> 1);
  const stream = new Float64Array((rowStarts[atomCount - 1] + 1) * NUMBERS_PER_MEETING);
  // A radius of 1 Å keeps the pairs without energy finite.
  for (let n = 0; n < stream.length; n += NUMBERS_PER_MEETING) {
    stream.fill(0.07, n, n + 2);
    stream.fill(0.12, n + 2, n + 4);
  }
  const place = (i: number, j: number): number =>
    (rowStarts[i] + ((j - i - 1) >> 1)) * NUMBERS_PER_MEETING + ((j - i - 1) & 1);
  for (let n = 0; n < radius.length; n++) {
    const start = place(atoms[2 * n], atoms[2 * n + 1]);
    stream[start] = 0.07 * radius[n];
    stream[start + 2] = 0.12 * radius[n] ** 7;
    stream[start + 4] = depth[n] * (1.07 * radius[n]) ** 7;
  }
  for (let n = 0; n < chargeProduct.length; n++) {
    const start = place(chargedAtoms[2 * n], chargedAtoms[2 * n + 1]);
    stream[start + 6] = (COULOMB / dielectricConstant) * chargeProduct[n];
  }
  return stream;
}
