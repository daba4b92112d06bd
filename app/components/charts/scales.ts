/** Scales and ticks shared by the drawn charts. */
export type Scale = (value: number) => number;

export const logScale = (low: number, high: number, from: number, to: number): Scale => {
  const span = Math.log(high / low);
  return (v) => from + ((to - from) * Math.log(v / low)) / span;
};
export const linearScale = (low: number, high: number, from: number, to: number): Scale => (v) => from + ((to - from) * (v - low)) / (high - low);

export const clamp = (v: number, low: number, high: number): number => Math.min(high, Math.max(low, v));

/** 1, 2, 5 steps of every decade inside [low, high]; only powers of ten when they would be more than `most`. */
export function logTicks(low: number, high: number, most = 8): number[] {
  const ticks: number[] = [];
  for (let e = Math.floor(Math.log10(low)); e <= Math.ceil(Math.log10(high)); e++) {
    for (const m of [1, 2, 5]) {
      const v = Number((m * 10 ** e).toPrecision(3));
      if (v >= low * 0.999 && v <= high * 1.001) ticks.push(v);
    }
  }
  if (ticks.length <= most) return ticks;
  const decades = ticks.filter((t) => Math.abs(Math.log10(t) - Math.round(Math.log10(t))) < 1e-9);
  const every = Math.ceil(decades.length / most);
  return decades.filter((_, i) => i % every === 0);
}

/** Round steps (1, 2, 5 times a power of ten) inside [low, high], about `count` of them. */
export function linearTicks(low: number, high: number, count = 5): number[] {
  const raw = (high - low) / Math.max(1, count);
  if (!(raw > 0)) return [low];
  const power = 10 ** Math.floor(Math.log10(raw));
  const step = power * ([1, 2, 5, 10].find((m) => m * power >= raw) ?? 10);
  const ticks: number[] = [];
  for (let v = Math.ceil(low / step - 1e-9) * step; v <= high + step * 1e-9; v += step) ticks.push(Number(v.toPrecision(12)));
  return ticks;
}

/** The 1-2-5 step at or below, or at or above, a positive value. */
export function niceBelow(v: number): number {
  const power = 10 ** Math.floor(Math.log10(v));
  return power * ([5, 2, 1].find((m) => m * power <= v * 1.0001) ?? 1);
}
export function niceAbove(v: number): number {
  const power = 10 ** Math.floor(Math.log10(v));
  return power * ([1, 2, 5, 10].find((m) => m * power >= v * 0.9999) ?? 10);
}

/** Text of a tick: 0.05, 2, 1e-5. */
export function tickText(v: number): string {
  if (v === 0) return '0';
  const a = Math.abs(v);
  const text = a < 1e-3 || a >= 1e5 ? v.toExponential(0).replace('e', '\u00d710^') : String(Number(v.toPrecision(6)));
  const [mantissa, exponent] = text.split('\u00d710^');
  if (exponent === undefined) return text.replace('-', '\u2212');
  return `${mantissa === '1' ? '' : `${mantissa ?? ''}\u00d7`}10${[...String(Number(exponent))].map((c) => (c === '-' ? '\u207b' : ('\u2070\u00b9\u00b2\u00b3\u2074\u2075\u2076\u2077\u2078\u2079'[Number(c)] ?? c))).join('')}`;
}

/**
 * Log-log interpolation between the two measured levels around `noise`, as the ranking does between ladder levels.
 * Null beside a missing value; the ends hold outside the ladder.
 */
export function interpolate(points: readonly { level: number; value: number | null }[], noise: number): number | null {
  if (points.length === 0) return null;
  const after = points.findIndex((p) => p.level >= noise * 0.9999);
  if (after === -1) return points[points.length - 1]?.value ?? null;
  const b = points[after];
  if (!b) return null;
  if (after === 0 || Math.abs(b.level / noise - 1) < 1e-3) return b.value;
  const a = points[after - 1];
  if (!a || a.value === null || b.value === null) return null;
  const t = Math.log(noise / a.level) / Math.log(b.level / a.level);
  if (a.value <= 0 || b.value <= 0) return a.value + t * (b.value - a.value);
  return Math.exp(Math.log(a.value) + t * Math.log(b.value / a.value));
}

/** Pushes labels apart: each keeps at least `gap` below the one before, none leaves [top, bottom]. Input sorted by y. */
export function spread<T extends { y: number }>(labels: readonly T[], gap: number, top: number, bottom: number): (T & { at: number })[] {
  const placed: (T & { at: number })[] = [];
  for (const l of labels) {
    const last = placed[placed.length - 1];
    placed.push({ ...l, at: Math.max(l.y, last ? last.at + gap : top) });
  }
  let limit = bottom;
  for (let i = placed.length - 1; i >= 0; i--) {
    const l = placed[i];
    if (l && l.at > limit) l.at = limit;
    limit = (l?.at ?? limit) - gap;
  }
  return placed;
}
