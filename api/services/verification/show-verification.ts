import type { Verification, VerificationItem } from '../../../shared/contracts/verification.ts';
import { sha256Hex } from '../../../solvers/core/hash';
import { withinBound, type VerificationCheck } from '../../../solvers/verification/check';
import { codeVersion } from '../../jobs/code-version.ts';
import type { VerificationRecord, Verifier } from '../../jobs/verification.ts';
import { toCsv, type CsvCell } from '../../http/csv.ts';
import { toSource } from '../catalogue/catalogue.ts';
import { commentLines } from '../files/comment-lines.ts';

/** What the instance has computed of the published values. The first reader sets it to work. */
export function showVerification(verifier: Verifier): Verification {
  verifier.hurry();
  const items = verifier.checks.map((check) => toItem(check, verifier.record(check.key)));
  const times = items.map((item) => item.at).filter((at) => at !== null).sort();
  const digests = items.map((item) => item.digest);
  return { codeVersion, running: verifier.running(), at: times.at(-1) ?? null, resultHash: digests.includes(null) ? null : sha256Hex(digests.join('\n')), items };
}

function toItem(check: VerificationCheck, record: VerificationRecord | undefined): VerificationItem {
  const { key, group, name, line, published, unit, bound, reason, cost } = check;
  const described = { key, group, name, line, published, unit, bound, reason, source: toSource(check.source), cost };
  if (!record) return { ...described, state: 'not-run', measured: null, gap: null, words: null, digest: null, seconds: null, at: null };
  const ran = { ...described, seconds: record.seconds, at: record.at.toISOString() };
  if (!record.outcome) return { ...ran, state: 'fail', measured: null, gap: null, words: record.reason, digest: null };
  const { measured, gap, words, digest } = record.outcome;
  return {
    ...ran, digest, state: withinBound(gap, bound) ? 'pass' : 'fail', gap: Number.isFinite(gap) ? gap : null,
    measured: typeof measured === 'number' && !Number.isFinite(measured) ? null : measured,
    words: words ?? (Number.isFinite(gap) ? null : 'What came out is not a number.'),
  };
}

export function verificationCsv(verifier: Verifier, now: Date): string {
  const { items, resultHash } = showVerification(verifier);
  const header = ['group', 'key', 'check', 'line', 'published', 'unit', 'measured', 'gap', 'bound', 'reason_of_bound', 'state', 'seconds', 'at', 'sha256_of_result', 'source', 'from_memory', 'words'];
  const rows = items.map((item): CsvCell[] => [
    item.group, item.key, item.name, item.line, numberOr(item.published), item.unit, item.measured, item.gap, item.bound, item.reason, item.state, item.seconds, item.at, item.digest, item.source.full,
    item.source.fromMemory, item.words,
  ]);
  return commentLines([`Published values computed again by this instance, ${now.toISOString()}`, `Code version ${codeVersion}`, `SHA-256 of the results ${resultHash ?? 'not yet, some have not run'}`]) + toCsv(header, rows);
}

/** A negative number is not a formula: as text it would get an apostrophe. */
const numberOr = (text: string): CsvCell => (text.startsWith('-') && Number.isFinite(Number(text)) ? Number(text) : text);
