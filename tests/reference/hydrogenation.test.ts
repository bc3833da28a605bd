/**
 * Heats of hydrogenation by PM7 against experiment (../shared/reference/hydrogenation.json: gas phase, 298 K, from tabulated
 * heats of formation). Skipped where the data or mopac is not there. The table is printed, failures of the model included.
 */
import { existsSync, readFileSync } from 'node:fs';
import { setImmediate } from 'node:timers/promises';
import { describe, expect, it } from 'vitest';
import { coordinatesOf } from '$lib/domain/molfile-geometry';
import { conformersTaskSchema } from '$lib/domain/compute';
import { ELEMENT_SYMBOLS, perform, readMolecule } from '$lib/engine';
import { describeMolecule } from '../../worker/programs/describe-molecule';
import { relaxByPm7 } from '../../worker/programs/mopac';
import { isGap } from '../../worker/programs/program';
import { hasMopac, MOPAC } from '../support/programs';

const file = new URL('../../../shared/reference/hydrogenation.json', import.meta.url);

interface Species {
  readonly name: string;
  readonly smiles: string;
  readonly product_smiles: string;
  readonly n_H2: number;
  readonly dHhyd298_gas_kcal_mean: number | null;
}

interface Row {
  readonly name: string;
  readonly n_H2: number;
  /** kcal/mol, as are the others. */
  readonly experiment: number;
  readonly PM7: number;
  readonly error: number;
}

/** The lowest heat of formation among the three lowest MMFF94s conformers, kcal/mol. */
async function heatOf(smiles: string): Promise<number> {
  const { conformers } = await perform(
    {
      molecule: { smiles },
      task: conformersTaskSchema.parse({ kind: 'conformers', effort: 'quick', limit: 3 }),
    },
    { now: () => performance.now(), breathe: () => setImmediate() },
  );
  const molecule = describeMolecule(readMolecule({ smiles }), ELEMENT_SYMBOLS);
  const limits = { seconds: 60, signal: new AbortController().signal };
  const heats: number[] = [];
  for (const { molfile } of conformers) {
    const point = await relaxByPm7(
      { path: MOPAC, version: '' },
      molecule,
      coordinatesOf(molfile),
      limits,
    );
    if (isGap(point)) console.log(`${smiles}: ${point.gap}`);
    else heats.push(point.energy);
  }
  return Math.min(...heats);
}

const isHere = hasMopac && existsSync(file);
const title = isHere
  ? 'heats of hydrogenation by PM7'
  : 'heats of hydrogenation by PM7 (skipped: mopac or ../shared/reference/hydrogenation.json is absent)';

describe.skipIf(!isHere)(title, () => {
  it('are those of experiment within the errors of the model', { timeout: 600_000 }, async () => {
    const { species } = JSON.parse(readFileSync(file, 'utf8')) as { species: Species[] };
    const heats = new Map<string, number>();
    const heat = async (smiles: string) => {
      if (!heats.has(smiles)) heats.set(smiles, await heatOf(smiles));
      return heats.get(smiles)!;
    };
    const rows: Row[] = [];
    for (const {
      name,
      smiles,
      product_smiles: product,
      n_H2,
      dHhyd298_gas_kcal_mean: experiment,
    } of species) {
      if (experiment === null || experiment === undefined || !product) continue;
      const computed = (await heat(product)) - (await heat(smiles));
      rows.push({
        name,
        n_H2,
        experiment,
        PM7: Number(computed.toFixed(2)),
        error: Number((computed - experiment).toFixed(2)),
      });
    }
    console.table(rows);
    // Read off the first run and rounded up: PM7 takes hydrogenation for less exothermic than it is, more so with more
    // substituents at the double bond. Known failure, so kept apart: cumulated double bonds, 10 kcal/mol and more.
    const isAllene = ({ name }: Row) => /^(allene|1,2-)/.test(name);
    const others = rows.filter((row) => !isAllene(row)).map(({ error }) => Math.abs(error));
    expect(Math.max(...others)).toBeLessThan(7.5);
    expect(others.reduce((sum, error) => sum + error, 0) / others.length).toBeLessThan(4.5);
    const failures = rows.filter(isAllene).map(({ error }) => error);
    expect(failures).toHaveLength(3);
    expect(Math.min(...failures)).toBeGreaterThan(9);
    expect(Math.max(...failures)).toBeLessThan(13);
    // What it gets right: trans is below cis, and conjugated dienes below isolated ones.
    const heatOfRow = (name: string) => rows.find((row) => row.name === name)!.PM7;
    expect(heatOfRow('cis-2-butene')).toBeLessThan(heatOfRow('trans-2-butene'));
    expect(heatOfRow('1,4-pentadiene')).toBeLessThan(heatOfRow('(E)-1,3-pentadiene'));
  });
});
