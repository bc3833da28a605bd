/**
 * Barriers and conformer differences of MMFF94s, through our scans and searches, against experiment and high-level
 * theory: ../shared/reference/barriers.json, where every row names its paper. Printed as a table.
 */
import { existsSync, readFileSync } from 'node:fs';
import { afterAll, describe, expect, it } from 'vitest';
import { barrierRows } from './barrier-rows';
import { measureRow } from './measure';

interface ReferenceRow {
  id: number;
  molecule: string;
  smiles: string;
  quantity: string;
  value: number;
  value_kcal: number | null;
  confidence: 'source seen' | 'from memory' | 'derived from seen source';
}

const file = new URL('../../../shared/reference/barriers.json', import.meta.url);
const present = existsSync(file);
const reference = new Map(
  present
    ? (JSON.parse(readFileSync(file, 'utf8')) as { rows: ReferenceRow[] }).rows.map((row) => [
        row.id,
        row,
      ])
    : [],
);

const table: string[] = [];

const title = present
  ? 'barriers against experiment'
  : 'barriers against experiment (skipped: ../shared/reference/barriers.json is absent)';

describe.skipIf(!present)(title, () => {
  it.each(barrierRows)('row $id', async ({ id, measure, tolerance, failure }) => {
    const row = reference.get(id)!;
    const expected = row.value_kcal ?? row.value;
    const model = await measureRow(row.smiles, measure);
    const error = model - expected;
    const cells = [
      `${row.molecule}: ${row.quantity}`.slice(0, 62).padEnd(62),
      model.toFixed(2).padStart(7),
      expected.toFixed(2).padStart(7),
      error.toFixed(2).padStart(7),
      (failure ? '' : `±${tolerance}`).padStart(6),
      row.confidence === 'from memory' ? 'memory' : 'seen  ',
      failure ? `known failure: ${failure.reason}` : '',
    ];
    table.push(cells.join(' '));
    expect(Math.abs(error - (failure?.error ?? 0))).toBeLessThanOrEqual(tolerance);
  });

  it('covers at least 25 rows, most of them within tolerance', () => {
    const failures = barrierRows.filter(({ failure }) => failure !== undefined);
    expect(barrierRows.length - failures.length).toBeGreaterThanOrEqual(25);
    expect(new Set(barrierRows.map(({ id }) => id)).size).toBe(barrierRows.length);
  });

  afterAll(() => {
    const head = `${'MMFF94s, kcal/mol or degrees'.padEnd(62)}   model  exper.   error   held source`;
    console.log([head, ...table].join('\n'));
  });
});
