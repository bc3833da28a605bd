import { expect, it } from 'vitest';
import { splitLines } from '../../scripts/lines';

async function* chunked(text: string, size: number): AsyncGenerator<string> {
  for (let start = 0; start < text.length; start += size) yield text.slice(start, start + size);
}

async function linesOf(text: string, size: number, longest = 100): Promise<(string | null)[]> {
  const lines = [];
  for await (const line of splitLines(chunked(text, size), longest)) lines.push(line);
  return lines;
}

it.each([1, 2, 3, 5, 1000])('cuts the same lines from chunks of %d', async (size) => {
  expect(await linesOf('one\n\ntwo\r\nthree', size)).toEqual(['one', '', 'two', 'three']);
});

it('makes no line of a last line end', async () => {
  expect(await linesOf('one\n', 2)).toEqual(['one']);
});

it.each([3, 1000])('drops a line that is too long and goes on (chunks of %d)', async (size) => {
  expect(await linesOf(`a\n${'b'.repeat(50)}\nc\n${'d'.repeat(50)}`, size, 10)).toEqual([
    'a',
    null,
    'c',
    null,
  ]);
});

it('takes no more chunks than are needed for the lines asked for', async () => {
  let taken = 0;
  async function* counted(): AsyncGenerator<string> {
    for (;;) {
      taken++;
      yield 'line\n';
    }
  }
  const lines = splitLines(counted(), 100);
  await lines.next();
  await lines.next();
  expect(taken).toBe(2);
});
