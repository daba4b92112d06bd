// Steps shared by the two commands. Plain Node: this file runs before anything is installed.
import { spawn, spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { dirname, join, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';

export const root = resolve(dirname(fileURLToPath(import.meta.url)), '..');
const npm = process.platform === 'win32' ? 'npm.cmd' : 'npm';

/** Runs a command in the checkout, its output shown; ends this process when it fails. */
export function must(command, args, options = {}) {
  const result = spawnSync(command, args, { cwd: root, stdio: 'inherit', ...options });
  if (result.error) {
    console.error(`${command} could not be started: ${result.error.message}`);
    process.exit(1);
  }
  if (result.status !== 0) {
    console.error(`\n${[command, ...args].join(' ')} ended with ${result.status ?? result.signal}.`);
    process.exit(result.status ?? 1);
  }
}

export const bin = (name) => join(root, 'node_modules', '.bin', name);

const hashOf = (text) => createHash('sha256').update(text).digest('hex');

/** Installs exactly what the lock file says, unless that is what is there. */
export function installIfNeeded() {
  const major = Number(process.versions.node.split('.')[0]);
  if (major < 20) {
    console.error(`Hadamark needs Node 20 or later; this is ${process.version}.`);
    process.exit(1);
  }
  const mark = join(root, 'node_modules', '.hadamark-lock');
  const wanted = hashOf(readFileSync(join(root, 'package-lock.json'))) + process.versions.modules;
  if (existsSync(mark) && readFileSync(mark, 'utf8') === wanted) return;
  console.log('Installing packages (first start, or the lock file changed) ...');
  must(npm, ['ci', '--no-audit', '--no-fund'], { env: { ...process.env, NODE_ENV: 'development' } });
  writeFileSync(mark, wanted);
}

const sources = ['app', 'api', 'shared', 'solvers', 'phantoms', 'index.html', 'package-lock.json', 'vite.config.ts', 'tailwind.config.ts', 'mikro-orm.config.ts', '.ci/build.mjs'];

function* filesUnder(path) {
  const full = join(root, path);
  if (!existsSync(full)) return;
  try {
    for (const entry of readdirSync(full, { withFileTypes: true }).sort((a, b) => (a.name < b.name ? -1 : 1)))
      if (entry.isDirectory()) yield* filesUnder(`${path}/${entry.name}`);
      else yield `${path}/${entry.name}`;
  } catch (error) {
    if (error.code !== 'ENOTDIR') throw error;
    yield path;
  }
}

/** Builds client and server, unless the sources are those of the last build. */
export function buildIfNeeded() {
  const hash = createHash('sha256');
  for (const source of sources) for (const file of filesUnder(source)) hash.update(file).update('\0').update(readFileSync(join(root, file))).update('\0');
  const wanted = hash.digest('hex');
  const mark = join(root, 'dist', '.built-from');
  if (existsSync(mark) && readFileSync(mark, 'utf8') === wanted) return;
  console.log('Building ...');
  rmSync(join(root, 'dist'), { recursive: true, force: true });
  must(process.execPath, [join(root, '.ci', 'build.mjs')]);
  mkdirSync(join(root, 'dist'), { recursive: true });
  writeFileSync(mark, wanted);
}

const found = (paths) => paths.find((path) => existsSync(path));
export const chromiumPath = () => found(['/usr/bin/chromium', '/usr/bin/chromium-browser', '/usr/bin/google-chrome']);
export const firefoxPath = () => found(['/usr/bin/firefox-esr', '/usr/bin/firefox']);

/** The browser tests drive Debian's Chromium and open Debian's Firefox; as root on Debian they are installed when missing. */
export function browsersIfNeeded() {
  const wanted = [['CHROMIUM_PATH', chromiumPath, 'chromium'], ['FIREFOX_PATH', firefoxPath, 'firefox-esr']];
  const missing = () => wanted.filter(([name, find]) => !(process.env[name] ? existsSync(process.env[name]) : find()));
  if (missing().length === 0) return;
  if (process.getuid?.() === 0 && existsSync('/usr/bin/apt-get')) {
    const packages = missing().map(([, , name]) => name);
    console.log(`Installing ${packages.join(' and ')} for the browser tests ...`);
    must('apt-get', ['update', '-qq']);
    must('apt-get', ['install', '-y', '-qq', '--no-install-recommends', ...packages, 'fonts-liberation'], { env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive' } });
    if (missing().length === 0) return;
  }
  console.error(`The browser tests need ${missing().map(([name, , browser]) => `${browser} (or ${name})`).join(' and ')}: install your system's package.`);
  process.exit(1);
}

/** Runs the long-lived process in the foreground and hands it our signals. */
export function serve(command, args, env = {}) {
  const child = spawn(command, args, { cwd: root, stdio: 'inherit', env: { ...process.env, ...env } });
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => child.kill(signal));
  child.on('error', (error) => {
    console.error(`${command} could not be started: ${error.message}`);
    process.exit(1);
  });
  child.on('exit', (code, signal) => process.exit(code ?? (signal ? 1 : 0)));
}
