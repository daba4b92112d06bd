import { useAxis } from '../noise-rule/axis-context';

interface LadderProps {
  /** Ladder levels, fractions. */
  levels: readonly number[];
  done: number;
  /** Share of the level being worked on, 0 to 1. */
  partial?: number;
  /** The level after the done ones is where the run stopped. */
  stopped?: boolean;
  /** Waiting: no level is being worked on. */
  waiting?: boolean;
}

const describe = ({ levels, done, stopped, waiting }: LadderProps): string =>
  `${done} of ${levels.length} levels done${stopped ? ', stopped' : waiting ? ', waiting' : ''}`;

/** One small box a level: filled done, hatched running, brick stopped. */
export function Ladder({ big = false, ...props }: LadderProps & { big?: boolean }) {
  const { levels, done, stopped, waiting } = props;
  return (
    <span className={big ? 'lad big' : 'lad'} role="img" aria-label={describe(props)}>
      {levels.map((level, i) => (
        <i key={level} className={i < done ? 'd' : i === done && !waiting ? (stopped ? 'x' : 'r') : undefined} />
      ))}
    </span>
  );
}

/** The large form with the level under each box; used while a run works or a page loads. */
export function LoadingLadder(props: LadderProps) {
  const axis = useAxis();
  const { levels, done, partial = 0, stopped, waiting } = props;
  return (
    <div className="lv" role="img" aria-label={describe(props)} style={{ gridTemplateColumns: `repeat(${levels.length}, 1fr)` }}>
      {levels.map((level, i) => (
        <div key={level}>
          <i
            className={i < done ? 'd' : i === done && !waiting ? (stopped ? 'x' : 'r') : undefined}
            style={i === done && !stopped && !waiting ? { '--done': `${Math.round(partial * 100)}%` } : undefined}
          />
          {axis.digits(level).replace(/^0(?=.)/, '')}
        </div>
      ))}
    </div>
  );
}
