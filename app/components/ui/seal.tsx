import { useMemo } from 'react';

/** Mulberry32, for drawing only. */
function generator(seed: number): () => number {
  let s = seed | 0;
  return () => {
    s = (s + 0x6d2b79f5) | 0;
    let t = Math.imul(s ^ (s >>> 15), 1 | s);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

/** Paths of the rosette of a hash (FNV-1a of its characters seeds the drawing). */
export function sealPaths(hash: string, size: number, lines = 5): string[] {
  let h = 2166136261;
  for (let i = 0; i < hash.length; i++) {
    h ^= hash.charCodeAt(i);
    h = Math.imul(h, 16777619);
  }
  const r = generator(h);
  const k1 = 3 + Math.floor(r() * 9);
  const k2 = k1 + 2 + Math.floor(r() * 9);
  const a1 = 0.05 + 0.22 * r();
  const a2 = 0.02 + 0.12 * r();
  const twist = 0.15 + 1.3 * r();
  const inner = 0.18 + 0.38 * r();
  const count = size >= 40 ? lines - 1 + Math.floor(r() * 3) : lines;
  const points = 240;
  return Array.from({ length: count }, (_, line) => {
    const b = inner + ((0.78 - inner) * line) / (count - 1 || 1);
    let d = '';
    for (let i = 0; i <= points; i++) {
      const t = (i / points) * 2 * Math.PI;
      const radius = 44 * (b + a1 * (1 - b * 0.55) * Math.cos(k1 * t + line * twist) + a2 * Math.cos(k2 * t - line * twist * 1.7));
      d += `${i ? 'L' : 'M'}${(radius * Math.cos(t)).toFixed(1)} ${(radius * Math.sin(t)).toFixed(1)}`;
    }
    return `${d}Z`;
  });
}

/** A line rosette drawn from a content hash, so that two hashes can be compared by eye. Print the hash beside it. */
export function Seal({ hash, size = 64, lines = 5 }: { hash: string; size?: number; lines?: number }) {
  const paths = useMemo(() => sealPaths(hash, size, lines), [hash, size, lines]);
  return (
    <svg className="seal" width={size} height={size} viewBox="-50 -50 100 100" aria-hidden="true">
      <g fill="none" stroke="currentColor" strokeWidth={size < 40 ? 1.8 : 0.95}>
        {paths.map((d, i) => (
          <path key={i} d={d} />
        ))}
      </g>
    </svg>
  );
}
