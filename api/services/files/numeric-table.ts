import { parse, CsvError } from 'csv-parse/sync';
import { AppError, type Issue } from '../../../shared/errors.ts';

/** Numbers read from text, row-major. */
export interface NumericTable {
  readonly rows: number;
  readonly cols: number;
  readonly values: Float64Array;
}

export interface TableLimits {
  readonly maxRows: number;
  readonly maxCols: number;
  /** Exact number of values in every row; null takes the first row's. */
  readonly cols: number | null;
  /** What a row is called in messages: 'Row', 'Frame'. */
  readonly rowName: string;
}

const numberPattern = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?$/;
/** Beyond any unit; sums of squares of what is below stay finite. */
export const largestNumber = 1e100;
const neighbourReach = 2;
const listedIssues = 20;

const rejected = (detail: string, issues?: Issue[], extra?: Record<string, unknown>, cause?: unknown): AppError =>
  new AppError('file-rejected', detail, issues, { ...(extra ? { extra } : {}), cause });

/**
 * Reads a CSV file of numbers: comma, semicolon or tab between values, a point as decimal mark, UTF-8, lines that begin
 * with # are comments. Rows and columns in messages count from 1 over the rows of numbers.
 * @throws AppError 'file-rejected' that names the row and the column, with the neighbours of the first bad cell in `extra`.
 */
export function readNumericTable(bytes: Uint8Array, limits: TableLimits): NumericTable {
  const cells = readCells(bytes, limits);
  const first = cells[0];
  if (!first) throw rejected('The file holds no numbers.');
  const cols = limits.cols ?? first.length;
  if (cells.length > limits.maxRows) throw rejected(`The file has ${cells.length} rows; at most ${limits.maxRows} are taken.`);
  if (cols > limits.maxCols) throw rejected(`The first row has ${cols} values; at most ${limits.maxCols} are taken.`);
  const values = new Float64Array(cells.length * cols);
  const issues: Issue[] = [];
  let faults = 0;
  let firstBad: { row: number; column: number } | undefined;
  const note = (row: number, column: number, message: string): void => {
    faults++;
    firstBad ??= { row, column };
    if (issues.length < listedIssues) issues.push({ path: ['file'], message, row, column });
  };
  cells.forEach((line, i) => {
    const row = i + 1;
    if (line.length !== cols) {
      const column = Math.min(line.length, cols) + 1;
      note(row, column, `${limits.rowName} ${row} has ${count(line.length)}, expected ${cols}.`);
      return;
    }
    line.forEach((text, j) => {
      const fault = cellFault(text);
      if (fault === undefined) values[i * cols + j] = Number(text);
      else note(row, j + 1, `${limits.rowName} ${row}, column ${j + 1}: ${fault}.`);
    });
  });
  if (firstBad) {
    const head = issues[0]?.message ?? '';
    const rest = faults > 1 ? ` ${faults - 1} more ${faults === 2 ? 'place needs' : 'places need'} a correction.` : '';
    throw rejected(`${head}${rest}`, issues, { faults, ...neighbours(cells, firstBad) });
  }
  return { rows: cells.length, cols, values };
}

function readCells(bytes: Uint8Array, limits: TableLimits): string[][] {
  const text = decodeText(bytes);
  const cells: string[][] = [];
  try {
    parse(text, {
      delimiter: delimiterOf(text),
      comment: '#',
      comment_no_infix: true,
      relax_column_count: true,
      skip_empty_lines: true,
      trim: true,
      // Long enough for the widest row in full precision; a file without line ends is refused early.
      max_record_size: 64 * Math.max(limits.maxCols, 64),
      on_record: (record: string[]) => {
        // One row more than the limit, so that the message can say that there are too many.
        if (cells.length <= limits.maxRows) cells.push(record);
        return null;
      },
    });
  } catch (cause) {
    if (!(cause instanceof CsvError)) throw cause;
    const line = typeof cause['lines'] === 'number' ? cause['lines'] : cells.length + 1;
    throw rejected(`Line ${line} cannot be read as CSV: ${csvReason(cause)}.`, [{ path: ['file'], message: csvReason(cause), row: line }], undefined, cause);
  }
  return cells;
}

function csvReason(error: CsvError): string {
  if (error.code === 'CSV_MAX_RECORD_SIZE') return 'it is longer than any row may be';
  if (error.code === 'CSV_QUOTE_NOT_CLOSED') return 'a quotation mark is not closed';
  return 'its quotation marks do not match';
}

function decodeText(bytes: Uint8Array): string {
  if (bytes.includes(0)) throw rejected('The file is not text: it holds zero bytes. Send CSV in UTF-8.');
  try {
    // ignoreBOM false drops the mark that spreadsheets write.
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes);
  } catch (cause) {
    throw rejected('The file is not UTF-8 text.', undefined, undefined, cause);
  }
}

/** Of the first line that is no comment. */
function delimiterOf(text: string): string {
  const line = text.split(/\r\n|\n|\r/, 200).find((candidate) => candidate.trim() !== '' && !candidate.trimStart().startsWith('#')) ?? '';
  if (line.includes(',')) return ',';
  if (line.includes(';')) return ';';
  return line.includes('\t') ? '\t' : ',';
}

function cellFault(text: string): string | undefined {
  if (text === '') return 'the cell is empty';
  if (numberPattern.test(text)) return Math.abs(Number(text)) <= largestNumber ? undefined : `${shorten(text)} is too large, the limit is ${largestNumber}`;
  if (/^[+-]?(?:nan|inf(?:inity)?)$/i.test(text)) return `${text} is not a finite number`;
  return `'${shorten(text)}' is not a number`;
}

const shorten = (text: string): string => (text.length > 24 ? `${text.slice(0, 24)}…` : text);
const count = (n: number): string => `${n} ${n === 1 ? 'value' : 'values'}`;

/** The cells around a bad one, as they stand in the file. */
function neighbours(cells: readonly string[][], at: { row: number; column: number }): Record<string, unknown> {
  const fromRow = Math.max(1, at.row - neighbourReach);
  const toRow = Math.min(cells.length, at.row + neighbourReach);
  const fromColumn = Math.max(1, at.column - neighbourReach);
  const toColumn = at.column + neighbourReach;
  const around: string[][] = [];
  for (let row = fromRow; row <= toRow; row++) around.push((cells[row - 1] ?? []).slice(fromColumn - 1, toColumn).map(shorten));
  return { row: at.row, column: at.column, neighbours: { fromRow, fromColumn, cells: around } };
}
