// npm run kernels: rebuilds the embedded WebAssembly after a change of solvers/kernels/*.as. With --check it only compares.
import { readFileSync, writeFileSync } from 'node:fs';
import { compileKernels, embedded } from './compile-kernels.mjs';

const { binary, text } = await compileKernels();
if (process.argv.includes('--check')) {
  if (readFileSync(embedded, 'utf8') !== text) {
    console.error('The embedded WebAssembly is not what the sources give: npm run kernels.');
    process.exitCode = 1;
  }
} else {
  writeFileSync(embedded, text);
  console.log(`${embedded}: ${binary.length} bytes of WebAssembly`);
}
