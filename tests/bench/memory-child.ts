/** The measured process of the memory section: does its work, then writes what it used as JSON. */
import { registerChemistryResources } from '$lib/server/chemistry-resources';
import { compute } from '../support/compute';
import { benchMolecules, verapamil } from './molecules';

interface Usage {
  /** Bytes in use after a full collection. */
  heap: number;
  resident: number;
}

export interface MemoryReport {
  molecules: number;
  seconds: number;
  /** Bytes, over the whole life of the process. */
  highestResident: number;
  early: Usage;
  late: Usage;
}

const MOLECULES = 1000;

function usage(): Usage {
  globalThis.gc?.();
  const { heapUsed, arrayBuffers, rss } = process.memoryUsage();
  return { heap: heapUsed + arrayBuffers, resident: rss };
}

/** One of 55 molecules in turn: the bench's smaller ones, lengthened by an alkyl chain at their first atom. */
function variant(n: number): string {
  const { smiles } = benchMolecules[n % 5];
  return 'C'.repeat(n % 11) + smiles;
}

async function search(): Promise<Usage> {
  const early = usage();
  await compute({ smiles: verapamil.smiles }, 'conformers');
  return early;
}

async function many(): Promise<Usage> {
  let early = usage();
  for (let n = 0; n < MOLECULES; n++) {
    await compute({ smiles: variant(n) }, 'minimize');
    if (n === MOLECULES / 10) early = usage();
  }
  return early;
}

registerChemistryResources();
const task = process.argv[2] === 'search' ? search : many;
const start = performance.now();
const early = await task();
const seconds = (performance.now() - start) / 1000;
const report: MemoryReport = {
  molecules: task === search ? 1 : MOLECULES,
  seconds,
  // Node.js gives kilobytes here.
  highestResident: process.resourceUsage().maxRSS * 1024,
  early,
  late: usage(),
};
process.stdout.write(JSON.stringify(report));
