import { limits } from '../../../shared/domain/limits';
import { AppError } from '../../../shared/errors.ts';
import type { ArrayFormat } from '../../entities/stored-array.ts';
import { readNpy } from './read-npy.ts';
import { readPng } from './read-png.ts';
import { readNumericTable, type NumericTable } from './numeric-table.ts';

/** The format by the first bytes; the name decides only where the bytes cannot (text). */
export function formatOf(name: string, bytes: Uint8Array): ArrayFormat {
  if (bytes[0] === 0x89 && bytes[1] === 0x50 && bytes[2] === 0x4e && bytes[3] === 0x47) return 'png';
  if (bytes[0] === 0x93 && bytes[1] === 0x4e && bytes[2] === 0x55 && bytes[3] === 0x4d) return 'npy';
  const ending = /\.([a-z0-9]+)$/i.exec(name)?.[1]?.toLowerCase();
  if (ending === 'png' || ending === 'npy') return ending;
  if (ending === 'csv' || ending === 'txt' || ending === 'tsv') return 'csv';
  const message = 'Send a PNG, a .npy or a CSV file.';
  throw new AppError('file-rejected', `The file '${name.slice(0, 80)}' is of no known kind. ${message}`, [{ path: ['file'], message }]);
}

/** A ground truth as an array, top row first. @throws AppError 'file-rejected'. */
export function readArrayFile(name: string, bytes: Uint8Array): NumericTable & { format: ArrayFormat } {
  if (bytes.length === 0) throw new AppError('file-rejected', 'The file is empty.', [{ path: ['file'], message: 'The file is empty.' }]);
  const format = formatOf(name, bytes);
  if (format === 'png') return { format, ...readPng(bytes, limits.arraySide) };
  if (format === 'npy') return { format, ...readNpy(bytes, limits.arraySide) };
  const table = readNumericTable(bytes, { maxRows: limits.arraySide, maxCols: limits.arraySide, cols: null, rowName: 'Row' });
  if (table.rows < 2 || table.cols < 2) {
    const message = `The array is ${table.rows} x ${table.cols}; each side must have at least 2 values.`;
    throw new AppError('file-rejected', message, [{ path: ['file'], message }]);
  }
  return { format, ...table };
}

/** Measured frames: CSV, one row a frame, the reference frame first. @throws AppError 'file-rejected'. */
export function readFramesFile(bytes: Uint8Array, valuesPerFrame: number): NumericTable {
  if (bytes.length === 0) throw new AppError('file-rejected', 'The file is empty.', [{ path: ['file'], message: 'The file is empty.' }]);
  const table = readNumericTable(bytes, { maxRows: limits.frames, maxCols: 5000, cols: valuesPerFrame, rowName: 'Row' });
  if (table.rows < 2) {
    const message = 'The file has one row; it needs a reference frame first and at least one frame after it.';
    throw new AppError('file-rejected', message, [{ path: ['file'], message }]);
  }
  return table;
}
