import { describe, expect, it } from 'vitest';
import { csvLine, csvTable } from './csv';

describe('csvTable', () => {
  it('quotes what needs it', () => {
    expect(
      csvTable(
        ['name', 'x'],
        [
          ['a,"b"', -1.5],
          ['line\nend', null],
        ],
      ),
    ).toBe('name,x\r\n"a,""b""",-1.5\r\n"line\nend",\r\n');
  });

  it.each(['=1+1', '+1', '-1', '@SUM(A1)', '\tx', '\rx'])('disarms %j', (text) => {
    expect(csvLine([text]).replace(/^"/, '')[0]).toBe("'");
  });
});
