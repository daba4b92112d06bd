import { describe, expect, it } from 'vitest';
import { toCsv } from '../../../api/http/csv.ts';

describe('CSV', () => {
  it('keeps a spreadsheet from running text as a formula', () => {
    const rows = ['=1+1', '+cmd', '-2+3', '@SUM(A1)', '\tx', '\rx'].map((text) => [text]);
    const cells = toCsv(['h'], rows).split('\r\n').slice(1, -1);
    for (const cell of cells) expect(cell).toMatch(/^"?'/);
  });
  it('leaves numbers as they are, negative ones too, with every digit', () => {
    expect(toCsv(['a', 'b', 'c', 'd'], [[-1.5, 0.1 + 0.2, 1e-7, Number.NaN]])).toBe('a,b,c,d\r\n-1.5,0.30000000000000004,1e-7,\r\n');
  });
  it('quotes commas, quotes and line breaks (RFC 4180, section 2)', () => {
    expect(toCsv(['name'], [['a,b'], ['say "x"'], ['two\nlines'], [null], [true]])).toBe('name\r\n"a,b"\r\n"say ""x"""\r\n"two\nlines"\r\n\r\ntrue\r\n');
  });
});
