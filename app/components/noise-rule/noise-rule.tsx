import { useMemo, useRef, type KeyboardEvent, type PointerEvent } from 'react';
import { formatDecibel, thinSpace } from '../../lib/format';
import { useNarrow } from '../../lib/use-media';
import { useWidth } from '../../lib/use-size';
import { IconButton } from '../ui/button';
import { useAxis } from './axis-context';
import { RuleDrawing, ruleInset, type RuleFocus } from './rule-drawing';
import { clampNoise, fromShare, nearestLevel, ruleScale, snap, stepLevel } from './scale';
import { useNoise } from './use-noise';

export interface NoiseRuleProps {
  /** Ladder levels, fractions; the default ladder when absent. */
  levels?: readonly number[];
  /** Draws at a level, where the page is about one bench. */
  draws?: number;
  /** Model-error floor of the phantom in focus, or the largest of several; a fraction. */
  floor?: number | null;
  /** Whose floor it is, where several phantoms are on the page. */
  floorOf?: string | null;
  /** The solver in focus and the noise at which it breaks down. */
  focus?: RuleFocus | null;
}

/** A slide rule for the noise: slider with arrow keys (ladder steps), Home, End, drag with snapping, two step buttons. */
export function NoiseRule({ levels, draws, floor: modelErrorFloor = null, floorOf = null, focus = null }: NoiseRuleProps) {
  const axis = useAxis();
  // The floor is a noise: it has no place on another axis.
  const floor = axis.isNoise ? modelErrorFloor : null;
  const { noise, setNoise } = useNoise();
  const scale = useMemo(() => ruleScale(levels), [levels]);
  const [ref, width] = useWidth(800);
  const dragging = useRef(false);
  const narrow = useNarrow();
  const value = clampNoise(scale, noise);
  const near = nearestLevel(scale, value);
  const below = floor !== null && value < floor;
  const small = width < 500;
  const factor = axis.unit ? 100 : 1;

  const set = (next: number) => setNoise(clampNoise(scale, next));
  const follow = (e: PointerEvent<HTMLElement>) => {
    const box = e.currentTarget.getBoundingClientRect();
    if (box.width === 0) return;
    const inset = ruleInset(box.width);
    set(snap(scale, fromShare(scale, (e.clientX - box.left - inset) / (box.width - 2 * inset))));
  };
  const onKeyDown = (e: KeyboardEvent) => {
    const next = {
      ArrowRight: () => stepLevel(scale, value, 1), ArrowUp: () => stepLevel(scale, value, 1), PageUp: () => stepLevel(scale, value, 1),
      ArrowLeft: () => stepLevel(scale, value, -1), ArrowDown: () => stepLevel(scale, value, -1), PageDown: () => stepLevel(scale, value, -1),
      Home: () => scale.min, End: () => scale.max,
    }[e.key];
    if (!next) return;
    e.preventDefault();
    set(next());
  };
  const standing = near.on ? 'measured ladder level' : 'interpolated';
  return (
    <div className="nr">
      <div className="nr-lab">
        {axis.isNoise ? <><b>Noise rule</b><span>relative noise over<br />signal-to-noise ratio</span></> : <><b>{axis.head}</b><span>{axis.fixed}</span></>}
      </div>
      <div
        className="nr-track"
        ref={ref}
        tabIndex={0}
        role="slider"
        aria-label={axis.isNoise ? 'Relative noise level' : axis.head}
        aria-valuemin={scale.min * factor}
        aria-valuemax={scale.max * factor}
        aria-valuenow={Number((value * factor).toPrecision(4))}
        aria-valuetext={`${axis.isNoise ? `${axis.format(value)} relative noise, ${formatDecibel(value)}` : axis.at(value)}, ${standing}${below ? ', below the model-error floor' : ''}`}
        onKeyDown={onKeyDown}
        onPointerDown={(e) => {
          dragging.current = true;
          e.currentTarget.setPointerCapture?.(e.pointerId);
          follow(e);
        }}
        onPointerMove={(e) => {
          if (dragging.current) follow(e);
        }}
        onPointerUp={() => {
          dragging.current = false;
        }}
        onPointerCancel={() => {
          dragging.current = false;
        }}
      >
        <RuleDrawing width={width} scale={scale} noise={value} floor={floor} focus={focus} />
      </div>
      <div className="nr-read">
        <div className="nr-big">{axis.digits(value)}{axis.unit ? <small>{thinSpace}{axis.unit}</small> : null}</div>
        <div className="nr-sub">
          {axis.isNoise ? formatDecibel(value) : axis.label}
          {small && focus?.breakdown ? (
            <>, <span style={{ color: 'var(--brick)' }}>breakdown {axis.format(focus.breakdown)}</span></>
          ) : small && floor ? (
            `, ${narrow ? 'model-error ' : ''}floor ${axis.format(floor)}`
          ) : floorOf && floor && !below ? (
            `, floor of ${floorOf}`
          ) : null}
          <br />
          {below ? 'below the model-error floor' : near.on ? `level ${near.index + 1} of ${scale.levels.length}${draws === undefined ? '' : `, ${draws} draws`}` : 'between levels, interpolated'}
        </div>
        <div className="nr-step">
          <IconButton label="Previous ladder level" onClick={() => set(stepLevel(scale, value, -1))}>{'\u2039'}</IconButton>
          <IconButton label="Next ladder level" onClick={() => set(stepLevel(scale, value, 1))}>{'\u203a'}</IconButton>
        </div>
      </div>
    </div>
  );
}

/** The rule in its band under the masthead. */
export function NoiseRuleBand(props: NoiseRuleProps) {
  const axis = useAxis();
  return (
    <section className="nr-band" aria-label={axis.isNoise ? 'Noise rule' : `Rule of ${axis.label}`}>
      <div className="wrap"><NoiseRule {...props} /></div>
    </section>
  );
}
