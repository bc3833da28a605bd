/** Bundles: what is in the zip, its sums, its names, and whether other programs read its geometries. */
import { execFileSync, spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { unzipSync } from 'fflate';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ENGINE_VERSION } from '$lib/engine';
import { answerSchema } from '$lib/domain/bundle-schema';
import { planSchema, readingSchema } from '$lib/domain/submission';
import { bundleBatch } from '$lib/server/bundles';
import { readUpload } from '$lib/server/drafts';
import type { Member } from '$lib/server/member';
import { stopQueue } from '$lib/server/queue';
import { submit } from '$lib/server/submission';
import { bytesOf, performAll } from '../support/batches';
import { newTeam } from '../support/people';

afterAll(stopQueue);

const rows = 'C=CC=C butadiene\nC[C@H](F)Cl ../=evil\nCCCC butadiene';
let team: Awaited<ReturnType<typeof newTeam>>;
let batchId: string;
let files: Record<string, Uint8Array>;

async function bundle(member: Member): Promise<Record<string, Uint8Array>> {
  const { archive } = await bundleBatch(member, batchId);
  const chunks: Buffer[] = [];
  for await (const chunk of archive) chunks.push(chunk as Buffer);
  return unzipSync(Buffer.concat(chunks));
}

const text = (path: string): string => new TextDecoder().decode(files[path]);

beforeAll(async () => {
  team = await newTeam();
  const reading = readingSchema.parse({});
  const options = { name: 'Bundled', source: 'paste', format: 'smi', reading } as const;
  batchId = await readUpload(team.chemist, options, bytesOf(rows), () => undefined);
  const plan = { conformers: {}, scans: { bonds: 'rotatable', step: 30 }, conjugation: {} };
  await submit(team.chemist, batchId, planSchema.parse(plan));
  await performAll(batchId);
  files = await bundle(team.reader);
}, 180_000);

describe('a bundle', () => {
  it('gives every molecule a folder with a safe name of its own', () => {
    const folders = new Set(Object.keys(files).flatMap((path) => path.split('/').slice(0, -1)));
    expect([...folders].sort()).toEqual(['butadiene', 'butadiene-2', 'evil']);
    for (const path of Object.keys(files)) expect(path).toMatch(/^[\w./-]+$/);
  });

  it('sums up every file in its manifest, with settings, versions and seeds', () => {
    const manifest = JSON.parse(text('manifest.json'));
    expect(Object.keys(manifest.sha256).sort()).toEqual(
      Object.keys(files)
        .filter((path) => path !== 'manifest.json')
        .sort(),
    );
    for (const [path, sum] of Object.entries(manifest.sha256)) {
      expect(createHash('sha256').update(files[path]).digest('hex')).toBe(sum);
    }
    expect(manifest.answers).toContainEqual(
      expect.objectContaining({
        kind: 'conformers',
        model: 'MMFF94s',
        engineVersion: ENGINE_VERSION,
        settings: expect.objectContaining({ seed: 1 }),
      }),
    );
  });

  it('describes its answers by the schema that goes with them', () => {
    const answers = Object.keys(files).filter((path) => /^[^/]+\/.*[.]json$/.test(path));
    expect(answers.length).toBeGreaterThanOrEqual(5);
    for (const path of answers)
      expect(() => answerSchema.parse(JSON.parse(text(path)))).not.toThrow();
    expect(JSON.parse(text('answer.schema.json')).properties.conformers.type).toBe('array');
  });

  it('holds profiles as tables and plots, and a methods paragraph with literature', () => {
    const plots = Object.keys(files).filter((path) => path.endsWith('.svg'));
    expect(plots).toHaveLength(2);
    expect(text(plots[0])).toContain('Relative energy / kcal/mol');
    expect(text(plots[0].replace('.svg', '.csv')).split('\r\n')[0]).toContain(
      'energy_kcal_per_mol',
    );
    expect(text('methods.md')).toMatch(/MMFF94s[\s\S]*Halgren/);
  });

  it('carries free energies with what they rest on, in tables and JSON', () => {
    const answer = JSON.parse(text('butadiene-2/conformers.json'));
    const [anti, gauche] = answer.conformers;
    for (const { vibrations } of [anti, gauche]) {
      expect(vibrations.flaw).toBeNull();
      // 3N - 6 modes of butane.
      expect(vibrations.modes.frequencies).toHaveLength(36);
    }
    const [head, ...rows] = text('butadiene-2/conformers.csv')
      .trim()
      .split('\r\n')
      .map((line) => line.split(','));
    const column = (name: string) => rows.map((row) => row[head.indexOf(name)]);
    const relative = column('free_energy_relative_kcal_per_mol').map(Number);
    expect(Math.min(...relative)).toBe(0);
    expect(column('imaginary_frequencies')).toEqual(['0', '0']);
    const shares = column('population_by_free_energy').map(Number);
    expect(shares[0] + shares[1]).toBeCloseTo(1, 5);
    const scan = Object.keys(files).find((path) => /butadiene-2\/scan_.*csv$/.test(path))!;
    const [scanHead, ...points] = text(scan)
      .trim()
      .split('\r\n')
      .map((line) => line.split(','));
    for (const point of points) {
      const imaginary = point[scanHead.indexOf('imaginary_frequencies')];
      expect(imaginary).toBe({ grid: '', minimum: '0', maximum: '1' }[point[0]]);
    }
  });

  it('is closed to other teams', async () => {
    const stranger = (await newTeam()).lead;
    await expect(bundleBatch(stranger, batchId)).rejects.toMatchObject({ status: 404 });
  });
});

const hasRdkit = spawnSync('/usr/bin/python3', ['-c', 'import rdkit']).status === 0;
const hasOpenBabel = spawnSync('obabel', ['-V']).status === 0;

describe('the geometries of a bundle', () => {
  const folder = mkdtempSync(join(tmpdir(), 'windlass-bundle-'));
  afterAll(() => rmSync(folder, { recursive: true, force: true }));
  const sdfPaths = () => Object.keys(files).filter((path) => path.endsWith('.sdf'));
  const write = (path: string): string => {
    const target = join(folder, path.replaceAll('/', '_'));
    writeFileSync(target, files[path]);
    return target;
  };

  // RDKit of Debian; where it is not installed the test is skipped and says so.
  it.skipIf(!hasRdkit)('are read by RDKit with energies, atom order and stereo', () => {
    const program = `
import json, sys
from rdkit import Chem
for path in sys.argv[1:]:
    for mol in Chem.SDMolSupplier(path, removeHs=False):
        Chem.AssignStereochemistryFrom3D(mol)
        print(json.dumps([path, mol.GetProp('ENERGY_KCAL_PER_MOL'), [a.GetSymbol() for a in mol.GetAtoms()],
                          Chem.MolToSmiles(Chem.RemoveHs(mol)), Chem.MolToSmiles(Chem.MolFromSmiles(mol.GetProp('SMILES')))]))
`;
    const paths = sdfPaths().map(write);
    const lines = execFileSync('/usr/bin/python3', ['-c', program, ...paths], { encoding: 'utf8' })
      .trim()
      .split('\n')
      .map((line) => JSON.parse(line) as [string, string, string[], string, string]);
    const recordCount = sdfPaths().reduce(
      (sum, path) => sum + text(path).split('$$$$').length - 1,
      0,
    );
    expect(lines).toHaveLength(recordCount);
    for (const [, , , read, stated] of lines) expect(read).toBe(stated);
    const conformers = lines.filter(([path]) => path.includes('evil_conformers'));
    const answer = JSON.parse(text('evil/conformers.json'));
    expect(conformers.map(([, energy]) => Number(energy))).toEqual(
      answer.conformers.map(({ energy }: { energy: number }) => Number(energy.toFixed(4))),
    );
    const symbols = answer.molfile
      .split('\n')
      .slice(4, 12)
      .map((line: string) => line.slice(31, 34).trim());
    expect(conformers[0][2]).toEqual(symbols);
  });

  // Open Babel of Debian; skipped where it is not installed.
  it.skipIf(!hasOpenBabel)('are read by Open Babel with energies and stereo', () => {
    const run = (...options: string[]): string =>
      execFileSync('obabel', options, { encoding: 'utf8', stdio: ['ignore', 'pipe', 'ignore'] });
    const path = write('evil/conformers.sdf');
    const [read] = run('-isdf', path, '-ocan').split(/\s/);
    const [stated] = run('-:C[C@H](F)Cl', '-ocan').split(/\s/);
    expect(read).toBe(stated);
    const answer = JSON.parse(text('evil/conformers.json'));
    expect(run('-isdf', path, '-osdf')).toContain(
      `<ENERGY_KCAL_PER_MOL>\n${answer.conformers[0].energy.toFixed(4)}`,
    );
  });
});
