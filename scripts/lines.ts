/** Cuts a stream of text into lines, taking no more of it than the reader asks for. */

/**
 * The lines of a stream of text, without their ends; null in the place of a line longer than `longest` characters,
 * whose text is dropped as it comes. A last line needs no end.
 */
export async function* splitLines(
  chunks: AsyncIterable<string>,
  longest: number,
): AsyncGenerator<string | null> {
  let rest = '';
  let tooLong = false;
  for await (const chunk of chunks) {
    let start = 0;
    for (let end = chunk.indexOf('\n'); end >= 0; end = chunk.indexOf('\n', start)) {
      const line = rest + chunk.slice(start, end);
      yield tooLong || line.length > longest ? null : line.replace(/\r$/, '');
      rest = '';
      tooLong = false;
      start = end + 1;
    }
    rest += chunk.slice(start);
    if (rest.length > longest) {
      rest = '';
      tooLong = true;
    }
  }
  if (tooLong) yield null;
  else if (rest !== '') yield rest;
}
