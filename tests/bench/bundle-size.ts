import { buildSync } from 'esbuild';
import { join } from 'node:path';
import { gzipSync } from 'node:zlib';

const root = join(import.meta.dirname, '../..');

function gzipKilobytes(exports: string, external: string[]): number {
  const { outputFiles } = buildSync({
    stdin: { contents: exports, resolveDir: root, loader: 'ts' }, bundle: true, minify: true, platform: 'browser', format: 'esm', target: 'es2022', write: false, external, logLevel: 'error',
  });
  return gzipSync(outputFiles[0].contents, { level: 9 }).length / 1000;
}

const whole = "export { prepareRun, runLevel } from './solvers/campaign/run'; export { createProblem, describeProblem } from './solvers/problems/registry';";
const oneFamily = "export { createEitInversion } from './solvers/problems/electrical-impedance/inversion-problem'; export { spectralSystem } from './solvers/methods/spectral-system'; export { evaluateMetrics } from './solvers/metrics/registry';";

/** Minified and packed, kB of 1000 bytes, without the parser of expressions. */
export interface CoreSizes {
  /** Meshes, elements, factorisations, decompositions and metrics of one family. */
  readonly core: number;
  /** Every family, method, rule and metric, without the checks of shapes. */
  readonly everything: number;
  /** The same with them (zod), as a worker of the site loads it. */
  readonly withSchemas: number;
}

export function coreSizes(): CoreSizes {
  return { core: gzipKilobytes(oneFamily, ['mathjs', 'zod']), everything: gzipKilobytes(whole, ['mathjs', 'zod']), withSchemas: gzipKilobytes(whole, ['mathjs']) };
}
