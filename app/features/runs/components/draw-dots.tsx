interface DrawDotsProps {
  draws: readonly (number | null)[];
  median: number | null;
  trivial: number | null;
  low: number;
  high: number;
  colour: string;
  /** Index of the draw to ring. */
  ring?: number | null;
  width?: number;
}

/** All draws of a level on one log axis; the vertical spread only keeps dots apart. The table beside it has the figures. */
export function DrawDots({ draws, median, trivial, low, high, colour, ring = null, width = 190 }: DrawDotsProps) {
  const x = (value: number) => 6 + (Math.log(Math.min(high, Math.max(low, value)) / low) / Math.log(high / low)) * (width - 12);
  return (
    <svg viewBox={`0 0 ${width} 24`} width="100%" height="24" preserveAspectRatio="none" aria-hidden="true" style={{ display: 'block' }}>
      <line x1="6" x2={width - 6} y1="12" y2="12" stroke="var(--hair)" />
      {trivial ? <line x1={x(trivial)} x2={x(trivial)} y1="1" y2="23" stroke="var(--brick-mark)" strokeDasharray="3 2" /> : null}
      {draws.map((value, i) => (value === null || value <= 0 ? null : <circle key={i} cx={x(value)} cy={12 + (((i * 7919) % 11) - 5)} r="2.3" fill={colour} fillOpacity=".55" />))}
      {median !== null && median > 0 ? <line x1={x(median)} x2={x(median)} y1="4" y2="20" stroke="var(--ink)" strokeWidth="1.6" /> : null}
      {ring !== null && draws[ring] ? <circle cx={x(draws[ring]!)} cy="12" r="5" fill="none" stroke="var(--amber-mark)" strokeWidth="1.8" /> : null}
    </svg>
  );
}
