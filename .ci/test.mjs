// npm test: install if needed, browser if needed, then types, lint, build and all tests. The last line counts them.
import { spawnSync } from 'node:child_process';
import { mkdirSync, readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { bin, browsersIfNeeded, buildIfNeeded, installIfNeeded, must, root } from './steps.mjs';

installIfNeeded();
browsersIfNeeded();

const step = (title) => console.log(`\n== ${title}`);
step('Types');
must(bin('tsc'), ['-p', '.', '--noEmit']);
step('Lint');
must(bin('eslint'), ['.', '--max-warnings', '0']);
step('Build');
buildIfNeeded();

let passed = 0;
let failed = 0;
let skipped = 0;
mkdirSync(join(root, '.cache'), { recursive: true });
for (const [title, project] of [['Numerics, contracts and references', 'numerics'], ['API', 'api'], ['Client', 'app'], ['Browser', 'browser']]) {
  step(title);
  const report = join(root, '.cache', `vitest-${project}.json`);
  rmSync(report, { force: true });
  const run = spawnSync(bin('vitest'), ['run', '--project', project, '--reporter=default', '--reporter=json', `--outputFile.json=${report}`], { cwd: root, stdio: 'inherit' });
  try {
    const result = JSON.parse(readFileSync(report, 'utf8'));
    passed += result.numPassedTests;
    failed += result.numFailedTests;
    skipped += result.numPendingTests + result.numTodoTests;
    if (run.status !== 0 && result.numFailedTests === 0) failed += 1;
  } catch (error) {
    console.error(`No result from the ${project} tests: ${error.message}`);
    failed += 1;
  }
}
console.log(`\n${passed} passed, ${failed} failed, ${skipped} skipped`);
process.exit(failed === 0 && passed > 0 ? 0 : 1);
