/** The small pure parts of the engine that the browser may import: no force field, no openchemlib. */
export { overlapAt } from './conjugation/pi-axis';
export * from './errors';
export * from './geometry';
export { superpose } from './superpose';
export type { Superposition } from './superpose';
export * from './thermo/basins';
export * from './thermo/boltzmann';
export * from './thermo/free-energy';
export * from './thermo/periodic-curve';
export * from './thermo/rates';
export * from './thermo/shape-free-energies';
export * from './torsion/fourier';
export * from './torsion/klyne-prelog';
export * from './torsion/path';
export * from './torsion/profile';
export * from './units';
