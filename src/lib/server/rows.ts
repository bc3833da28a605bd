/** Splits a file or a pasted text into the rows it holds, as they stream in; what a row means is the engine's business. */
import { parse } from 'csv-parse';
import { Readable } from 'node:stream';
import { ROW_LIMIT, UPLOAD_LIMIT, type Format } from '../domain/submission';

/** One row as given. */
export interface RawRow {
  /** Line on which the row begins, from 1. */
  readonly line: number;
  readonly name: string;
  readonly format: 'smiles' | 'molfile';
  readonly text: string;
}

/** A file that cannot be taken at all: too long, or without the columns it needs. */
export class UploadError extends Error {}

/** Longest single line that is read; anything longer is not a chemical file. */
const LINE_LIMIT = 1_000_000;
/** Names of a CSV's columns, in lower case, in the order they are looked for. */
const SMILES_COLUMNS = ['smiles', 'canonical_smiles', 'structure'];
const NAME_COLUMNS = ['name', 'id', 'title', 'compound', 'compound_id'];

/** Yields the rows of a stream of bytes; throws UploadError when there are too many of them, or of bytes. */
export async function* splitRows(
  bytes: AsyncIterable<Uint8Array>,
  format: Format,
): AsyncGenerator<RawRow> {
  const limited = limitBytes(bytes);
  const rows =
    format === 'smi'
      ? splitSmiles(limited)
      : format === 'csv'
        ? splitCsv(limited)
        : splitRecords(limited);
  let count = 0;
  for await (const row of rows) {
    count += 1;
    if (count > ROW_LIMIT) throw new UploadError(`A batch may have at most ${ROW_LIMIT} rows.`);
    yield row;
  }
}

async function* limitBytes(bytes: AsyncIterable<Uint8Array>): AsyncGenerator<Uint8Array> {
  let total = 0;
  for await (const chunk of bytes) {
    total += chunk.byteLength;
    if (total > UPLOAD_LIMIT) {
      throw new UploadError(`A file may have at most ${UPLOAD_LIMIT / 1024 / 1024} MB.`);
    }
    yield chunk;
  }
}

/** Lines of a stream, without their ends, whatever kind of ends they are. */
async function* splitLines(bytes: AsyncIterable<Uint8Array>): AsyncGenerator<string> {
  const decoder = new TextDecoder('utf-8');
  let rest = '';
  for await (const chunk of bytes) {
    rest += decoder.decode(chunk, { stream: true });
    // A carriage return at the very end may be the first half of a line end.
    const whole = rest.endsWith('\r') ? rest.length - 1 : rest.length;
    const lines = rest.slice(0, whole).split(/\r\n|\n|\r/);
    rest = lines.pop() + rest.slice(whole);
    if (rest.length > LINE_LIMIT) throw new UploadError('A line of this file is far too long.');
    yield* lines;
  }
  rest += decoder.decode();
  if (rest.length > 0) yield* rest.split(/\r\n|\n|\r/);
}

/** One SMILES a line, with an optional name after white space; empty lines and lines that begin with # are passed over. */
async function* splitSmiles(bytes: AsyncIterable<Uint8Array>): AsyncGenerator<RawRow> {
  let line = 0;
  for await (const raw of splitLines(bytes)) {
    line += 1;
    const [, text, name] = /^\s*(\S*)\s*(.*?)\s*$/.exec(raw.replace(/^\uFEFF/, ''))!;
    if (text === '' || text.startsWith('#')) continue;
    yield { line, name, format: 'smiles', text };
  }
}

/** A table with a header; the SMILES and name columns are found by their usual names. */
async function* splitCsv(bytes: AsyncIterable<Uint8Array>): AsyncGenerator<RawRow> {
  const records = Readable.from(bytes).pipe(
    parse({
      bom: true,
      delimiter: [',', ';', '\t'],
      info: true,
      relax_column_count: true,
      skip_empty_lines: true,
      max_record_size: LINE_LIMIT,
    }),
  );
  let smilesColumn = -1;
  let nameColumn = -1;
  try {
    for await (const { record, info } of records as AsyncIterable<{
      record: string[];
      info: { lines: number };
    }>) {
      if (smilesColumn < 0) {
        const header = record.map((title) => title.trim().toLowerCase());
        smilesColumn = findColumn(header, SMILES_COLUMNS);
        nameColumn = findColumn(header, NAME_COLUMNS);
        if (smilesColumn < 0) {
          throw new UploadError('The first line of a CSV file must name a column "smiles".');
        }
        continue;
      }
      yield {
        line: info.lines,
        name: record[nameColumn]?.trim() ?? '',
        format: 'smiles',
        text: record[smilesColumn]?.trim() ?? '',
      };
    }
  } catch (error) {
    if (error instanceof UploadError || !(error instanceof Error) || !('code' in error))
      throw error;
    throw new UploadError(`This is no readable CSV file: ${error.message}`);
  }
}

function findColumn(header: readonly string[], names: readonly string[]): number {
  for (const name of names) {
    const column = header.indexOf(name);
    if (column >= 0) return column;
  }
  return -1;
}

/** MOL and SDF records, parted by lines of $$$$; the first line of each is its name. */
async function* splitRecords(bytes: AsyncIterable<Uint8Array>): AsyncGenerator<RawRow> {
  let line = 0;
  let begin = 1;
  let record: string[] = [];
  const finish = (): RawRow => ({
    line: begin,
    name: record[0]?.trim() ?? '',
    format: 'molfile',
    text: `${record.join('\n')}\n`,
  });
  for await (const raw of splitLines(bytes)) {
    line += 1;
    if (raw.startsWith('$$$$')) {
      yield finish();
      record = [];
      begin = line + 1;
    } else {
      record.push(raw);
    }
  }
  if (record.some((text) => text.trim() !== '')) yield finish();
}
