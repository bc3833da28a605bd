/**
 * `npm run --silent compute`: the computation without a server. Reads one JSON request from standard input, or one a
 * line with `--lines`, and writes one JSON result each to standard output, in order. `--budget <seconds>` ends each
 * search after that time with what it has. Exit code: 0 when every request succeeded, 1 when any failed, 2 when any
 * input was no JSON.
 */
import { once } from 'node:events';
import { setImmediate } from 'node:timers/promises';
import { parseArgs } from 'node:util';
import { computeRequestSchema, describeRequestError } from '$lib/domain/compute';
import { InputError, perform } from '$lib/engine';
import { registerChemistryResources } from '$lib/server/chemistry-resources';
import { splitLines } from './lines';

/** Longest request, characters; a line without an end must not fill the memory. */
const LONGEST_REQUEST = 4_000_000;

const succeeded = 0;
const failed = 1;
const notJson = 2;

interface Answer {
  readonly result: unknown;
  readonly exitCode: number;
}

function refusal(code: string, message: string, place: { atom?: number; line?: number } = {}) {
  return { error: { code, message, ...place } };
}

/** The result of one request, or what is wrong with it. Never throws. */
async function answer(text: string | null, budget: number | undefined): Promise<Answer> {
  if (text === null) {
    const message = `The request is longer than ${LONGEST_REQUEST} characters.`;
    return { result: refusal('too-large', message), exitCode: failed };
  }
  let json: unknown;
  try {
    json = JSON.parse(text);
  } catch (error) {
    const message = `The input is no JSON: ${(error as Error).message}`;
    return { result: refusal('not-json', message), exitCode: notJson };
  }
  const parsed = computeRequestSchema.safeParse(json);
  if (!parsed.success) {
    const message = describeRequestError(parsed.error);
    return { result: refusal('bad-setting', message), exitCode: failed };
  }
  try {
    const result = await perform(parsed.data, {
      now: () => performance.now(),
      breathe: () => setImmediate(),
      budget,
    });
    return { result, exitCode: succeeded };
  } catch (error) {
    return { result: failure(error), exitCode: failed };
  }
}

function failure(error: unknown) {
  if (error instanceof InputError) {
    const { code, message, atom, line } = error;
    return refusal(code, message, {
      ...(atom !== undefined && { atom }),
      ...(line !== undefined && { line }),
    });
  }
  console.error(error);
  return refusal('internal', error instanceof Error ? error.message : String(error));
}

/** Writes one line and waits while the reader is behind. */
async function writeLine(value: unknown): Promise<void> {
  if (!process.stdout.write(`${JSON.stringify(value)}\n`)) await once(process.stdout, 'drain');
}

/** The texts of the requests on standard input; null for one that is too long. */
async function* requestTexts(lines: boolean): AsyncGenerator<string | null> {
  process.stdin.setEncoding('utf8');
  if (lines) {
    for await (const line of splitLines(process.stdin, LONGEST_REQUEST)) {
      if (line === null || line.trim() !== '') yield line;
    }
    return;
  }
  let text = '';
  for await (const chunk of process.stdin) {
    text += chunk as string;
    if (text.length > LONGEST_REQUEST) {
      yield null;
      return;
    }
  }
  yield text;
}

function readArguments(): { lines: boolean; budget: number | undefined } {
  const { values } = parseArgs({
    options: { lines: { type: 'boolean', default: false }, budget: { type: 'string' } },
  });
  if (values.budget === undefined) return { lines: values.lines, budget: undefined };
  const seconds = Number(values.budget);
  if (!(seconds > 0)) throw new Error('--budget needs a number of seconds');
  return { lines: values.lines, budget: 1000 * seconds };
}

let lines: boolean;
let budget: number | undefined;
try {
  ({ lines, budget } = readArguments());
} catch (error) {
  console.error(
    `${(error as Error).message}\nUsage: npm run --silent compute -- [--lines] [--budget seconds]`,
  );
  process.exit(failed);
}
// A reader that has seen enough is no failure of ours.
process.stdout.on('error', (error: NodeJS.ErrnoException) => {
  process.exit(error.code === 'EPIPE' ? succeeded : failed);
});
registerChemistryResources();
let exitCode = succeeded;
for await (const text of requestTexts(lines)) {
  const { result, exitCode: own } = await answer(text, budget);
  exitCode = Math.max(exitCode, own);
  await writeLine(result);
}
process.exitCode = exitCode;
