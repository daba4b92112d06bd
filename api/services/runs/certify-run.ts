import type { EntityManager } from '@mikro-orm/sqlite';
import type { Certificate } from '../../../shared/contracts/certificates';
import type { Actor } from '../../../shared/domain/permissions.ts';
import { caution } from '../benches/caution.ts';
import { verdictWords } from '../review/record-verdict.ts';
import { requireFinished, type LoadedRun } from './find-run.ts';
import { showRun } from './show-run.ts';

/** What a printed certificate says. Only a finished run has one. */
export async function certifyRun(em: EntityManager, input: { readonly run: LoadedRun; readonly actor: Actor | null; readonly now: Date; readonly origin: string }): Promise<Certificate> {
  const { run, now, origin } = input;
  requireFinished(run);
  const bench = run.entry.$.bench.$;
  const version = run.entry.$.solverVersion.$;
  const phantom = run.phantomVersion.$;
  const shown = await showRun(em, input);
  const newest = shown.verdicts[0];
  const url = `${origin}/runs/${run.id}`;
  const standing = newest ? `${verdictWords[newest.verdict].name[0]?.toUpperCase()}${verdictWords[newest.verdict].name.slice(1)} by ${newest.by.handle} on ${newest.at.slice(0, 10)}` : null;
  return {
    run: shown,
    bench: { question: bench.question, revision: bench.revision, contentHash: bench.contentHash },
    phantomHash: run.phantomHash,
    solverHash: version.contentHash,
    standing,
    citation: `${version.solver.$.group.$.name}: ${version.solver.$.name}, version ${version.n}, on ${phantom.name}, version ${phantom.n}. Hadamark, run ${run.id}, bench ${bench.id} revision ${bench.revision}. ${standing ?? 'Not reviewed'}. Result hash ${run.resultHash ?? ''}. ${url}`,
    caution: [...caution],
    issuedAt: now.toISOString(),
    url,
  };
}
