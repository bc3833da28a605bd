/**
 * Enthalpy and free energy of an ideal gas of one shape of a molecule from its stored frequencies and moments: rigid rotor,
 * harmonic oscillators, and soft modes' entropy drawn towards that of a free rotor after Grimme (Chem. Eur. J. 2012, 18, 9955).
 *
 * Symmetry numbers are left out everywhere (σ = 1). Conformers are counted as labelled minima: the degeneracy of a conformer is
 * the number of its labelled copies, and N!-like factors of renumbering are the same for all. A conformer of symmetry number
 * σ has 1/σ as many labelled copies, so dividing by σ as well would count symmetry twice (butane: anti σ = 2 and one copy,
 * gauche σ = 2 and two mirror images; chair σ = 6 and 2 copies, twist-boat σ = 4 and 6 copies). Likewise a rate over a
 * barrier is that from one labelled minimum over one labelled saddle. Differences of free energies between shapes of one
 * molecule do not depend on the choice; an absolute entropy of a symmetric molecule is R ln σ above the tabulated one.
 */
import { AVOGADRO, BOLTZMANN, GAS_CONSTANT, KJ_PER_KCAL, PLANCK, SPEED_OF_LIGHT } from '../units';

/** What free energies at any temperature are computed from. */
export interface Vibrations {
  /** cm⁻¹, ascending; imaginary ones are negative. Unscaled. */
  readonly frequencies: readonly number[];
  /** Principal moments of inertia, g/mol Å², ascending: three, two for a linear molecule, none for an atom. */
  readonly moments: readonly number[];
  /** g/mol */
  readonly mass: number;
}

/** What comes on top of the model energy. */
export interface Thermochemistry {
  /** Zero-point energy, kcal/mol. */
  readonly zeroPoint: number;
  /** H - E, zero-point energy included, kcal/mol. */
  readonly enthalpy: number;
  /** kcal/(mol K), at 1 bar. */
  readonly entropy: number;
  /** G - E, kcal/mol, at 1 bar. */
  readonly freeEnergy: number;
}

/** Standard pressure, Pa: 1 bar (IUPAC). It is the same for all shapes and leaves their differences alone. */
const STANDARD_PRESSURE = 1e5;
/** Grimme's ω0, cm⁻¹, and α. */
const ROTOR_FREQUENCY = 100;
const ROTOR_EXPONENT = 4;
/** A frequency nearer to zero than this is that of a flat place and no sign of a saddle, cm⁻¹. */
const FLAT = 5;
/** Modes softer than this are the same free rotor, cm⁻¹; it only keeps logarithms finite. */
const SOFTEST = 0.01;
/** Energy of one quantum of 1 cm⁻¹, kcal/mol. */
const QUANTUM = (AVOGADRO * PLANCK * SPEED_OF_LIGHT) / 1000 / KJ_PER_KCAL;
/** g/mol Å² in kg m², and g/mol in kg. */
const KILOGRAM = 1e-3 / AVOGADRO;
const INERTIA = KILOGRAM * 1e-20;

/** How many frequencies are imaginary; a flat place's are not counted. */
export function imaginaryModes({ frequencies }: Vibrations): number {
  return frequencies.filter((frequency) => frequency < -FLAT).length;
}

/** Thermochemistry at a temperature in K. Imaginary modes are left out: at a saddle one is the way over it. */
export function thermochemistry(vibrations: Vibrations, temperature: number): Thermochemistry {
  const modes = vibrations.frequencies
    .filter((frequency) => frequency >= -FLAT)
    .map((frequency) => Math.max(Math.abs(frequency), SOFTEST));
  const rt = GAS_CONSTANT * temperature;
  const average = vibrations.moments.reduce((sum, moment) => sum + moment, 0) / 3;
  let zeroPoint = 0;
  let enthalpy = (2.5 + vibrations.moments.length / 2) * rt;
  let entropy =
    translationalEntropy(vibrations.mass, temperature) +
    rotationalEntropy(vibrations.moments, temperature);
  for (const frequency of modes) {
    const quantum = QUANTUM * frequency;
    zeroPoint += quantum / 2;
    enthalpy += quantum / 2 + quantum / Math.expm1(quantum / rt);
    entropy += modeEntropy(frequency, average, temperature);
  }
  return { zeroPoint, enthalpy, entropy, freeEnergy: enthalpy - temperature * entropy };
}

/** Sackur and Tetrode's, kcal/(mol K). */
function translationalEntropy(mass: number, temperature: number): number {
  const kt = BOLTZMANN * temperature;
  const states =
    ((2 * Math.PI * mass * KILOGRAM * kt) / PLANCK ** 2) ** 1.5 * (kt / STANDARD_PRESSURE);
  return GAS_CONSTANT * (Math.log(states) + 2.5);
}

/** That of a rigid rotor in the classical limit with σ = 1, kcal/(mol K). */
function rotationalEntropy(moments: readonly number[], temperature: number): number {
  if (moments.length === 0) return 0;
  const states = moments.map((moment) => rotorStates(moment * INERTIA, temperature));
  const product = states.reduce((total, factor) => total * factor, 1);
  const count = moments.length === 3 ? Math.sqrt(Math.PI) * Math.sqrt(product) : states[0];
  return GAS_CONSTANT * (Math.log(count) + moments.length / 2);
}

/** 8π²IkT/h² for a moment of inertia in kg m². */
function rotorStates(moment: number, temperature: number): number {
  return (8 * Math.PI ** 2 * moment * BOLTZMANN * temperature) / PLANCK ** 2;
}

/**
 * Entropy of one mode, kcal/(mol K), between that of a harmonic oscillator and of a free rotor (Grimme 2012, eqs. 3 to 8).
 * `average` is the mean of the molecule's principal moments, g/mol Å².
 */
function modeEntropy(frequency: number, average: number, temperature: number): number {
  const ratio = (QUANTUM * frequency) / (GAS_CONSTANT * temperature);
  // Eq. 3, the harmonic oscillator.
  const oscillator = ratio / Math.expm1(ratio) - Math.log(-Math.expm1(-ratio));
  // Eqs. 4 and 5: the free rotor with this frequency, no heavier than the molecule.
  const free = PLANCK / (8 * Math.PI ** 2 * frequency * SPEED_OF_LIGHT);
  const moment = (free * average * INERTIA) / (free + average * INERTIA);
  // Eq. 6, the entropy of the free rotor: 8π³μ'kT/h² is π times that of `rotorStates`.
  const rotor = 0.5 + 0.5 * Math.log(Math.PI * rotorStates(moment, temperature));
  // Eqs. 7 and 8.
  const weight = 1 / (1 + (ROTOR_FREQUENCY / frequency) ** ROTOR_EXPONENT);
  return GAS_CONSTANT * (weight * oscillator + (1 - weight) * rotor);
}
