import { spawn, spawnSync, type ChildProcess } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createInterface, type Interface } from 'node:readline';

/** What the peer answers for one stage: seconds of each repetition by name, and figures that show it computed the same. */
export interface PeerAnswer {
  readonly seconds: Readonly<Record<string, readonly number[]>>;
  readonly figures: Readonly<Record<string, number>>;
}

export interface PeerFacts {
  readonly numpy: string;
  readonly scipy: string;
  readonly python: string;
}

/** numpy and scipy in one child process, asked stage by stage; data are handed over as raw little-endian files. */
export class PeerProcess {
  private constructor(
    private readonly child: ChildProcess, private readonly lines: Interface, private readonly folder: string, readonly facts: PeerFacts,
  ) {}

  /** Null where python3 with numpy and scipy is not on the machine. */
  static async start(threads: number): Promise<PeerProcess | null> {
    const script = join(import.meta.dirname, '..', 'peer.py');
    const probe = spawnSync('python3', ['-c', 'import numpy, scipy, sys; print(numpy.__version__, scipy.__version__, sys.version.split()[0])'], { encoding: 'utf8' });
    if (probe.status !== 0) return null;
    const [numpy, scipy, python] = probe.stdout.trim().split(' ');
    const count = String(threads);
    const child = spawn('python3', [script], {
      stdio: ['pipe', 'pipe', 'inherit'], env: { ...process.env, OMP_NUM_THREADS: count, OPENBLAS_NUM_THREADS: count, MKL_NUM_THREADS: count, PYTHONWARNINGS: 'ignore', PYTHONDONTWRITEBYTECODE: '1' },
    });
    return new PeerProcess(child, createInterface({ input: child.stdout! }), mkdtempSync(join(tmpdir(), 'hadamark-bench-')), { numpy, scipy, python });
  }

  /** Writes an array where the stages find it by its name. */
  hand(name: string, values: Float64Array | Int32Array): void {
    const kind = values instanceof Int32Array ? 'i4' : 'f8';
    writeFileSync(join(this.folder, `${name}.${kind}`), new Uint8Array(values.buffer, values.byteOffset, values.byteLength));
  }

  async ask(stage: string, options: Readonly<Record<string, number>> = {}): Promise<PeerAnswer> {
    const answer = new Promise<string>((resolve, reject) => {
      const failed = (): void => reject(new Error(`The peer ended during '${stage}'.`));
      this.child.once('exit', failed);
      this.lines.once('line', (line) => {
        this.child.off('exit', failed);
        resolve(line);
      });
    });
    this.child.stdin!.write(`${JSON.stringify({ stage, folder: this.folder, options })}\n`);
    return JSON.parse(await answer) as PeerAnswer;
  }

  async stop(): Promise<void> {
    const ended = new Promise((resolve) => this.child.once('exit', resolve));
    this.child.stdin!.end();
    await ended;
    rmSync(this.folder, { recursive: true, force: true });
  }
}
