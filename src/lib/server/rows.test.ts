import { describe, expect, it } from 'vitest';
import { splitRows, UploadError, type RawRow } from './rows';
import type { Format } from '../domain/submission';

/** Sends a text in chunks of a few bytes, so that every boundary falls everywhere. */
async function* inChunks(text: string, size: number): AsyncGenerator<Uint8Array> {
  const bytes = new TextEncoder().encode(text);
  for (let at = 0; at < bytes.length; at += size) yield bytes.slice(at, at + size);
}

async function rowsOf(text: string, format: Format, size = 3): Promise<RawRow[]> {
  const rows: RawRow[] = [];
  for await (const row of splitRows(inChunks(text, size), format)) rows.push(row);
  return rows;
}

describe('splitRows', () => {
  it.each([1, 2, 3, 1000])('reads SMILES lines with names in chunks of %i bytes', async (size) => {
    const text = '\uFEFFCCO ethanol\r\n\r\n# a remark\r\nC=CC=C\tbutadiene, dry  \rc1ccccc1\n';
    expect(await rowsOf(text, 'smi', size)).toEqual([
      { line: 1, name: 'ethanol', format: 'smiles', text: 'CCO' },
      { line: 4, name: 'butadiene, dry', format: 'smiles', text: 'C=CC=C' },
      { line: 5, name: '', format: 'smiles', text: 'c1ccccc1' },
    ]);
  });

  it('reads a CSV by the names of its columns', async () => {
    const text = 'ID,SMILES,remark\nA-1,CCO,"says ""hi"", twice"\nA-2,,none\n';
    expect(await rowsOf(text, 'csv')).toMatchObject([
      { name: 'A-1', text: 'CCO' },
      { name: 'A-2', text: '' },
    ]);
  });

  it('refuses a CSV without a SMILES column', async () => {
    await expect(rowsOf('name,mass\na,1\n', 'csv')).rejects.toThrow(UploadError);
  });

  it('parts SDF records and keeps where each begins', async () => {
    const rows = await rowsOf('first\n\n\nM  END\n$$$$\nsecond\n\n\nM  END\n$$$$\n', 'sdf');
    expect(rows.map(({ name, line }) => [name, line])).toEqual([
      ['first', 1],
      ['second', 6],
    ]);
    expect(rows[0].text).toBe('first\n\n\nM  END\n');
  });

  it('reads a molfile without an end mark', async () => {
    expect(await rowsOf('only\n\n\nM  END', 'mol')).toMatchObject([{ name: 'only', line: 1 }]);
  });

  it('refuses more rows than a batch may have', async () => {
    await expect(rowsOf('C\n'.repeat(20_001), 'smi', 4096)).rejects.toThrow('at most 20000 rows');
  });
});
