import { describe, expect, it } from 'vitest';
import { marginPlace } from '../../../app/components/charts/margin-bar';
import { measuredValue, printedValue } from '../../../app/features/verification/model/printed';
import { browserVerdict, readShow, shown, slowest, tallyBrowser, tightest } from '../../../app/features/verification/model/verdicts';
import { createVerificationClient, type VerificationPort } from '../../../app/workers/verification-client';
import type { VerificationRequest, VerificationResponse } from '../../../app/workers/verification-messages';
import type { VerificationItem } from '../../../shared/contracts/verification';

const item = (over: Partial<VerificationItem> = {}): VerificationItem => ({
  key: 'k', group: 'Methods', name: 'Name', line: 'line', published: '1.25', unit: '', bound: 1e-3, reason: 'Because.', source: { short: 's', full: 'full', fromMemory: false }, cost: 'light',
  state: 'pass', measured: 1.2503, gap: 3e-4, words: null, digest: 'a'.repeat(64), seconds: 0.1, at: '2026-12-01T00:00:00.000Z', ...over,
});
const outcome = { measured: 1.2503, gap: 3e-4, digest: 'a'.repeat(64), seconds: 0.2 };

describe('what the browser says beside the server', () => {
  it('tells equal bits, other bits within the bound, a gap beyond it, and nothing to compare with', () => {
    expect(browserVerdict(item(), outcome)).toBe('same');
    expect(browserVerdict(item(), { ...outcome, digest: 'b'.repeat(64) })).toBe('differs');
    expect(browserVerdict(item(), { ...outcome, digest: 'b'.repeat(64), gap: 2e-3 })).toBe('fail');
    expect(browserVerdict(item({ digest: null, state: 'not-run' }), outcome)).toBe('unmatched');
  });
  it('is counted', () => {
    const items = ['a', 'b', 'c', 'd'].map((key) => item({ key }));
    const results = new Map([
      ['a', { state: 'done', outcome } as const], ['b', { state: 'done', outcome: { ...outcome, digest: 'b'.repeat(64) } } as const], ['c', { state: 'failed', message: 'broke' } as const], ['d', { state: 'running' } as const],
    ]);
    expect(tallyBrowser(items, results)).toEqual({ done: 2, words: '1 with the same bits, 1 differs, 1 failure' });
    expect(tallyBrowser(items, new Map())).toEqual({ done: 0, words: 'nothing computed yet' });
  });
});

describe('summary', () => {
  it('takes the margin closest to 1, exact checks left out, also where it is below 1', () => {
    const exact = item({ key: 'exact', gap: 0, bound: 0 });
    const wide = item({ key: 'wide', gap: 1e-6 });
    const failed = item({ key: 'failed', gap: 2e-3, state: 'fail' });
    expect(tightest([exact, wide])).toEqual({ item: wide, margin: 1e-3 / 1e-6 });
    expect(tightest([exact, wide, failed])?.margin).toBe(0.5);
    expect(tightest([exact])).toBeNull();
  });
  it('finds the slowest and filters', () => {
    const items = [item({ key: 'a', seconds: null, state: 'not-run' }), item({ key: 'b', seconds: 2, state: 'fail' }), item({ key: 'c', seconds: 1 })];
    expect(slowest(items)?.key).toBe('b');
    expect(shown(items, 'not-run').map((i) => i.key)).toEqual(['a']);
    expect(shown(items, 'failed').map((i) => i.key)).toEqual(['b']);
    expect(shown(items, 'all').length).toBe(3);
    expect([readShow('failed'), readShow('nonsense'), readShow(null)]).toEqual(['failed', 'all', 'all']);
  });
});

describe('figures', () => {
  it('show one digit more than was printed, a real minus, and the ends of a hash', () => {
    expect(measuredValue(9.283629599, '9.28')).toBe('9.284');
    expect(measuredValue(-2.4325066, '-2.432517')).toBe('−2.4325066');
    expect(measuredValue(5, '5')).toBe('5');
    expect(measuredValue(2.0000712, '2')).toBe('2.0001');
    expect(measuredValue(null, '2')).toBe('–');
    expect(printedValue('-2.43')).toBe('−2.43');
    expect(printedValue('ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad')).toBe('ba7816bf … f20015ad');
    expect(printedValue('equal')).toBe('equal');
  });
  it('stand on a log axis from 1e-16 to 1 with both ends held', () => {
    expect(marginPlace(1)).toBe(200);
    expect(marginPlace(1e-8)).toBeCloseTo(102, 9);
    expect(marginPlace(1e-16)).toBe(4);
    expect(marginPlace(0)).toBe(4);
    expect(marginPlace(64)).toBe(200);
  });
});

describe('the client of the worker', () => {
  const fake = () => {
    const sent: VerificationRequest[] = [];
    const port: VerificationPort & { stopped: boolean } = { postMessage: (m) => void sent.push(m), terminate() { this.stopped = true; }, onmessage: null, onerror: null, stopped: false };
    return { port, sent, answer: (data: VerificationResponse) => port.onmessage?.({ data } as MessageEvent<VerificationResponse>) };
  };
  it('tells the beginning, then the figures or the reason', async () => {
    const { port, sent, answer } = fake();
    const client = createVerificationClient(() => port);
    const begun: string[] = [];
    const good = client.run('a', () => void begun.push('a'));
    const bad = client.run('b');
    expect(sent.map((m) => m.key)).toEqual(['a', 'b']);
    answer({ id: 1, state: 'begun' });
    expect(begun).toEqual(['a']);
    answer({ id: 1, state: 'done', outcome });
    answer({ id: 2, state: 'failed', message: 'There is no verification check.' });
    expect(await good).toEqual(outcome);
    await expect(bad).rejects.toThrow('There is no verification check.');
  });
  it('ends the worker when it is stopped or breaks, and starts a new one after', async () => {
    const workers = [fake(), fake(), fake()];
    let next = 0;
    const client = createVerificationClient(() => workers[next++]!.port);
    const stopped = client.run('a');
    client.stop();
    await expect(stopped).rejects.toMatchObject({ name: 'AbortError' });
    expect(workers[0]!.port.stopped).toBe(true);
    const broken = client.run('b');
    workers[1]!.port.onerror?.({ message: 'out of memory' } as ErrorEvent);
    await expect(broken).rejects.toThrow('out of memory');
    void client.run('c');
    expect(workers[2]!.sent.map((m) => m.key)).toEqual(['c']);
  });
});
