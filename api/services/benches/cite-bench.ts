import type { Citation } from '../../../shared/contracts/benches';
import { caution } from './caution.ts';
import type { LoadedBench } from './find-bench.ts';

/** A closed bench is cited as it was closed; an open one with the day it was read. */
export function citeBench(input: { readonly bench: LoadedBench; readonly now: Date; readonly origin: string }): Citation {
  const { bench, now, origin } = input;
  const day = (bench.closedAt ?? now).toISOString().slice(0, 10);
  const url = `${origin}/benches/${bench.slug}`;
  const state = bench.closedAt ? `closed ${day}` : `read ${day}`;
  const group = bench.group.$.name;
  const note = `Revision ${bench.revision}, ${state}, content hash ${bench.contentHash}`;
  const bibtex = [
    `@misc{hadamark-${bench.id.toLowerCase()}-r${bench.revision},`,
    `  author = {{${texText(group)}}},`,
    `  title = {${texText(bench.title)}: ${texText(bench.question)}},`,
    `  howpublished = {Hadamark, bench ${bench.id}},`,
    `  year = {${day.slice(0, 4)}},`,
    `  url = {${url}},`,
    `  note = {${note}}`,
    '}',
  ].join('\n');
  return {
    bibtex,
    plain: `${group}: ${bench.title}. ${bench.question} Hadamark, bench ${bench.id}, revision ${bench.revision}, ${state}. Content hash ${bench.contentHash}. ${url}`,
    contentHash: bench.contentHash,
    revision: bench.revision,
    caution: [...caution],
  };
}

const signs: Record<string, string> = { '\\': '\\textbackslash{}', '{': '\\{', '}': '\\}', '%': '\\%', '&': '\\&', $: '\\$', '#': '\\#', _: '\\_', '~': '\\textasciitilde{}', '^': '\\textasciicircum{}' };
const texText = (text: string): string => text.replaceAll(/[\\{}%&$#_~^]/g, (sign) => signs[sign] ?? sign);
