/** One number wherever it is read: on the page, in the bundle, and from the command line. */
import { spawnSync } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { expect, test, type Page } from '@playwright/test';
import { unzipSync } from 'fflate';
import { projectRoot } from '../../scripts/folders.mjs';
import { answerSchema } from '../../src/lib/domain/bundle-schema';
import type { z } from 'zod';
import { openMolecule, signInAs } from '../support/pages';

type Bundled = z.infer<typeof answerSchema>;

/** Energies are written to a ten-thousandth of a kcal/mol. */
const DIGITS = 4;

interface Bundle {
  readonly answers: readonly Bundled[];
  /** What the command line says to the bundle's requests, in the same order. */
  readonly computed: readonly Record<string, unknown>[];
  /** A file's lines after its head, by the cells of the head. */
  table(path: RegExp): Record<string, string>[];
}

async function takeBundle(page: Page): Promise<Bundle> {
  const [download] = await Promise.all([
    page.waitForEvent('download'),
    page.getByRole('link', { name: 'Download bundle', exact: true }).click(),
  ]);
  const files = unzipSync(readFileSync(await download.path()));
  const paths = Object.keys(files);
  const text = (path: string) => new TextDecoder().decode(files[path]);
  const requests = text('requests.jsonl');
  const command = spawnSync('npm', ['run', '--silent', 'compute', '--', '--lines'], {
    cwd: projectRoot,
    input: requests,
    encoding: 'utf8',
    maxBuffer: 100_000_000,
  });
  expect(command.status, command.stderr).toBe(0);
  return {
    answers: paths
      .filter((path) => /^[^/]+\/.*[.]json$/.test(path))
      .map((path) => answerSchema.parse(JSON.parse(text(path)))),
    computed: command.stdout
      .trim()
      .split('\n')
      .map((line) => JSON.parse(line)),
    table(path) {
      const [head, ...lines] = text(paths.find((each) => path.test(each))!)
        .trim()
        .split('\r\n')
        .map((line) => line.split(','));
      return lines.map((line) => Object.fromEntries(line.map((cell, n) => [head[n], cell])));
    },
  };
}

/** The cells of a table's rows on the page, as text with a plain minus. */
async function shownRows(page: Page, caption: string): Promise<string[][]> {
  const rows = await page.getByRole('table', { name: caption }).locator('tbody tr').all();
  return Promise.all(
    rows.map(async (row) => {
      const cells = await row.locator('th, td').allInnerTexts();
      return cells.map((cell) => cell.trim().replace('−', '-'));
    }),
  );
}

function bothOf<Kind extends Bundled['kind']>({ answers, computed }: Bundle, kind: Kind) {
  const place = answers.findIndex((answer) => answer.kind === kind);
  return [answers[place], computed[place]] as const;
}

const rounded = (values: readonly number[], digits = DIGITS) =>
  values.map((value) => Number(value.toFixed(digits)));

test('page, bundle and command line agree on a diene', async ({ page }) => {
  await signInAs(page, 'chemist');
  await openMolecule(page, 'Dienes for the primer', 'chloroprene');
  const bundle = await takeBundle(page);

  const [conformers, searched] = bothOf(bundle, 'conformers');
  const again = searched.conformers as { energy: number; population: number }[];
  expect(conformers.conformers.length).toBeGreaterThan(1);
  expect(rounded(again.map(({ energy }) => energy))).toEqual(
    rounded(conformers.conformers.map(({ energy }) => energy)),
  );
  expect(bundle.table(/conformers.*csv$/).map((row) => Number(row.energy_kcal_per_mol))).toEqual(
    rounded(conformers.conformers.map(({ energy }) => energy)),
  );
  expect((await shownRows(page, 'Conformers')).map((cells) => cells[1])).toEqual(
    conformers.conformers.map(({ relative }) => relative.toFixed(2)),
  );

  const [{ profiles }, scanned] = bothOf(bundle, 'scan');
  const points = scanned.points as { energy: number }[];
  expect(points).toHaveLength(24);
  expect(rounded(points.map(({ energy }) => energy))).toEqual(
    rounded(profiles[0].points.map(({ energy }) => energy)),
  );
  const stationary = bundle.table(/scan.*csv$/).filter(({ kind }) => kind !== 'grid');
  const found = scanned.stationary as { label: string; relative: number }[];
  expect(found.map(({ label }) => label)).toEqual(stationary.map(({ label }) => label));
  expect(rounded(found.map(({ relative }) => relative))).toEqual(
    stationary.map((row) => Number(row.relative_kcal_per_mol)),
  );
  const shown = await shownRows(page, 'Stationary points');
  expect(shown.map((cells) => [cells[0], cells[2], cells[3]])).toEqual(
    stationary.map((row) => [
      row.label,
      Number(row.angle_degrees).toFixed(1),
      Number(row.relative_kcal_per_mol).toFixed(2),
    ]),
  );

  const [{ details }, described] = bothOf(bundle, 'conjugation');
  const [bond] = described.bonds as { difference: number; barrier: number; sCisFraction: number }[];
  const [kept] = details.bonds as (typeof bond)[];
  expect(rounded([bond.difference, bond.barrier, bond.sCisFraction])).toEqual(
    rounded([kept.difference, kept.barrier, kept.sCisFraction]),
  );
  const [[, , , difference, , , barrier]] = await shownRows(page, 'Conjugated bonds');
  expect([difference, barrier]).toEqual([bond.difference.toFixed(2), bond.barrier.toFixed(2)]);
});

test('page, bundle and command line agree on a strained geometry', async ({ page }) => {
  await signInAs(page, 'reader');
  await openMolecule(page, 'Benzanilide, as packed', 'benzanilide as packed');
  const bundle = await takeBundle(page);
  const [{ details }, measured] = bothOf(bundle, 'strain');
  expect(rounded([measured.strain as number])).toEqual(rounded([details.strain as number]));
  const torsions = measured.torsions as { strain: number }[];
  const [whole, ...bonds] = bundle.table(/strain.*csv$/);
  expect(Number(whole.strain_kcal_per_mol)).toBe(rounded([measured.strain as number])[0]);
  expect(rounded(torsions.map(({ strain }) => strain))).toEqual(
    bonds.map((row) => Number(row.strain_kcal_per_mol)),
  );
  const shown = await shownRows(page, 'Strain by bond');
  expect(shown.map((cells) => cells[1]).sort()).toEqual(
    torsions.map(({ strain }) => strain.toFixed(2)).sort(),
  );
});
