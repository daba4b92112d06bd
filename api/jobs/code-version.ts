import { createHash } from 'node:crypto';
import { existsSync, readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';

/** Beside the sources and beside the built server alike. */
const root = path.join(import.meta.dirname, '../..');

/**
 * What computed a result: the version of the package and, where the sources are at hand, a hash over the numerical code and
 * the versions of the packages it stands on.
 */
export const codeVersion: string = readCodeVersion();

function readCodeVersion(): string {
  const manifest = JSON.parse(readFileSync(path.join(root, 'package.json'), 'utf8')) as { version?: unknown; dependencies?: Record<string, string> };
  const version = typeof manifest.version === 'string' ? manifest.version : '0.0.0';
  const solvers = path.join(root, 'solvers');
  if (!existsSync(solvers)) return version;
  const hash = createHash('sha256');
  const numerical = /^(?:@stdlib\/|@noble\/|@kninnug\/|delaunator|mathjs|ml-matrix)/;
  hash.update(JSON.stringify(Object.entries(manifest.dependencies ?? {}).filter(([name]) => numerical.test(name)).sort()));
  for (const file of readdirSync(solvers, { recursive: true, encoding: 'utf8' }).filter((name) => name.endsWith('.ts')).sort()) {
    hash.update(`${file.replaceAll(path.sep, '/')}\n`);
    hash.update(readFileSync(path.join(solvers, file)));
  }
  return `${version}+${hash.digest('hex').slice(0, 12)}`;
}
