/** Cells that a spreadsheet would run as a formula get an apostrophe in front, which it shows as text. */
const formulaStart = /^[=+\-@\t\r]/;

export type CsvCell = string | number | boolean | null | undefined;

/** CSV after RFC 4180: comma, CRLF, quotes doubled. Numbers keep every digit; a missing value is an empty cell. */
export function toCsv(header: readonly string[], rows: Iterable<readonly CsvCell[]>): string {
  const lines = [header.map(csvCell).join(',')];
  for (const row of rows) lines.push(row.map(csvCell).join(','));
  return `${lines.join('\r\n')}\r\n`;
}

function csvCell(value: CsvCell): string {
  if (value === null || value === undefined) return '';
  if (typeof value === 'number') return Number.isFinite(value) ? String(value) : '';
  if (typeof value === 'boolean') return String(value);
  const guarded = formulaStart.test(value) ? `'${value}` : value;
  return /[",\r\n]/.test(guarded) ? `"${guarded.replaceAll('"', '""')}"` : guarded;
}
