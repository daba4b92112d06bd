import { existsSync } from 'node:fs';
import { readFile } from 'node:fs/promises';
import path from 'node:path';
import { z } from 'zod';
import { licenceSchema } from '../../../shared/contracts/common';
import { phantomDefinitionSchema } from '../../../shared/domain/phantom-definition';

const stockSchema = z.strictObject({ name: z.string(), licence: licenceSchema, definition: phantomDefinitionSchema });
export type StockPhantom = z.infer<typeof stockSchema> & {
  readonly description: string;
  /** The file with the values, where the ground truth is an array. */
  readonly values: { readonly name: string; readonly bytes: Uint8Array } | null;
};

/** `phantoms/` of the checkout, from the sources or from the built server. */
export function stockFolder(): string {
  const candidates = ['../../phantoms', '../../../phantoms'].map((relative) => path.join(import.meta.dirname, relative));
  return candidates.find((folder) => existsSync(folder)) ?? candidates[1]!;
}

/** Reads `phantoms/<folder>`: phantom.json, description.md and, for an array, values.png. */
export async function readStockPhantom(folder: string, root: string = stockFolder()): Promise<StockPhantom> {
  const base = path.join(root, folder);
  const stock = stockSchema.parse(JSON.parse(await readFile(path.join(base, 'phantom.json'), 'utf8')));
  const description = (await readFile(path.join(base, 'description.md'), 'utf8')).trim();
  const name = 'values.png';
  const values = stock.definition.truth.kind === 'array' ? { name, bytes: new Uint8Array(await readFile(path.join(base, name))) } : null;
  return { ...stock, description, values };
}
