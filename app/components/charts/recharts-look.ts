/** Shared props of the recharts figures, so that they look like the drawn ones. */
export const axisLook = {
  tick: { fontSize: 11, fill: 'var(--ink-2)', fontFamily: 'var(--sans)' },
  stroke: 'var(--hair-2)',
  tickLine: false,
} as const;

export const gridLook = { stroke: 'var(--hair)' } as const;
export const lineLook = { isAnimationActive: false, dot: false, activeDot: false } as const;
