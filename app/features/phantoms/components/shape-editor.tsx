import { useRef, type KeyboardEvent, type PointerEvent } from 'react';
import { z } from 'zod';
import { ColourBar } from '../../../components/images/colour-bar';
import { DiscImage, type ElectrodeLayout } from '../../../components/images/disc-image';
import { Button } from '../../../components/ui/button';
import { FactList } from '../../../components/ui/layout';
import { useToast } from '../../../components/ui/toast';
import { parseDecimal } from '../../../lib/decimal';
import { formatNumber } from '../../../lib/format';
import { limits } from '../../../../shared/domain/limits';
import { moveShape, newShape, reach, shapeNames, type DraftShape, type ShapeKind } from '../model/draft-shape';
import { dragShape, type Grip } from '../model/shape-drag';
import { ShapeOverlay } from './shape-overlay';
import { ShapeSteppers, ShapeTable } from './shape-table';
import type { TruthPicture } from './use-truth-picture';

interface Props {
  readonly shapes: readonly DraftShape[];
  readonly onShapes: (update: (shapes: readonly DraftShape[]) => DraftShape[]) => void;
  readonly selected: string | null;
  readonly onSelect: (id: string | null) => void;
  readonly radiusMm: number;
  readonly background: number;
  readonly electrodes: ElectrodeLayout;
  readonly truth: TruthPicture;
  readonly issueAt: (path: string) => string | undefined;
  readonly backgroundField: React.ReactNode;
}

/** Half the side of the drawing in its own units, as in the disc image with numbers. */
const view = 120;
const gripSchema = z.union([z.object({ part: z.enum(['body', 'a', 'b', 'angle']) }), z.object({ part: z.literal('vertex'), index: z.int() })]);

function readGrip(target: EventTarget): { id: string; grip: Grip } | null {
  if (!(target instanceof SVGElement)) return null;
  const { shape, grip } = target.dataset;
  if (!shape || !grip) return null;
  const parsed = gripSchema.safeParse(JSON.parse(grip));
  return parsed.success ? { id: shape, grip: parsed.data } : null;
}

/** The disc and the typed table are the same data: drag by the body, handles and ring; arrow keys move by 1 mm. */
export function ShapeEditor({ shapes, onShapes, selected, onSelect, radiusMm, background, electrodes, truth, issueAt, backgroundField }: Props) {
  const toast = useToast();
  const drag = useRef<{ start: DraftShape; grip: Grip; from: [number, number] } | null>(null);
  const change = (shape: DraftShape) => onShapes((all) => all.map((s) => (s.id === shape.id ? shape : s)));
  const current = shapes.find((s) => s.id === selected);

  const toMm = (e: PointerEvent<HTMLElement>): [number, number] => {
    const box = (e.currentTarget.querySelector('svg') ?? e.currentTarget).getBoundingClientRect();
    const unit = (2 * view) / (box.width || 1);
    return [(((e.clientX - box.left) * unit - view) * radiusMm) / 100, (-((e.clientY - box.top) * unit - view) * radiusMm) / 100];
  };
  const onPointerDown = (e: PointerEvent<HTMLDivElement>) => {
    const grip = readGrip(e.target);
    const start = grip && shapes.find((s) => s.id === grip.id);
    if (!grip || !start) return;
    drag.current = { start, grip: grip.grip, from: toMm(e) };
    e.currentTarget.setPointerCapture?.(e.pointerId);
    onSelect(start.id);
  };
  const onPointerMove = (e: PointerEvent<HTMLDivElement>) => {
    if (drag.current) change(dragShape(drag.current.start, drag.current.grip, drag.current.from, toMm(e)));
  };
  const end = () => {
    drag.current = null;
  };
  const onKeyDown = (e: KeyboardEvent<HTMLDivElement>) => {
    if (!current) return;
    if (e.key === 'Delete' || e.key === 'Backspace') {
      e.preventDefault();
      remove(current.id);
      return;
    }
    if (e.key === ' ' || e.key === 'Enter') {
      e.preventDefault();
      onSelect(shapes[(shapes.indexOf(current) + 1) % shapes.length]?.id ?? null);
      return;
    }
    const by = { ArrowLeft: [-1, 0], ArrowRight: [1, 0], ArrowUp: [0, 1], ArrowDown: [0, -1] }[e.key];
    if (!by) return;
    e.preventDefault();
    const far = e.shiftKey ? 10 : 1;
    change(moveShape(current, (by[0] ?? 0) * far, (by[1] ?? 0) * far));
  };
  const add = (kind: ShapeKind) => {
    const shape = newShape(kind, radiusMm, background, shapes);
    onShapes((all) => [...all, shape]);
    onSelect(shape.id);
  };
  const remove = (id: string) => {
    const index = shapes.findIndex((s) => s.id === id);
    const gone = shapes[index];
    if (!gone) return;
    const rest = shapes.filter((s) => s.id !== id);
    onShapes((all) => all.filter((s) => s.id !== id));
    if (selected === id) onSelect(rest[Math.min(index, rest.length - 1)]?.id ?? null);
    toast(`${gone.label} removed.`, {
      undo: () => {
        onShapes((all) => [...all.slice(0, index), gone, ...all.slice(index)]);
        onSelect(gone.id);
      },
    });
  };

  const gaps = shapes.map((s) => radiusMm - reach(s)).filter(Number.isFinite);
  const gap = gaps.length ? Math.min(...gaps) : null;
  const targets = shapes.filter((s) => s.target).length;
  const [low, high] = truth.scale;
  return (
    <div className="sheet gt">
      <div>
        <div
          className="ed" tabIndex={0} role="group" aria-label={`Ground truth on the disc${current ? `, ${current.label} chosen at x ${current.x} mm, y ${current.y} mm` : ''}. Arrow keys move the chosen shape by 1 mm, with Shift by 10 mm; space chooses the next; Delete removes it.`}
          onPointerDown={onPointerDown} onPointerMove={onPointerMove} onPointerUp={end} onPointerCancel={end} onKeyDown={onKeyDown}
        >
          <DiscImage label={`Ground truth with ${shapes.length} shapes; their values are in the table beside it`} picture={truth.picture} low={low} high={high} electrodes={electrodes} numbered>
            <ShapeOverlay shapes={shapes} selected={selected} scale={radiusMm > 0 ? 100 / radiusMm : 0} />
          </DiscImage>
        </div>
        <div style={{ marginTop: 10 }}><ColourBar labels={[formatNumber(low, 2), `${formatNumber(background, 2)} background`, `${formatNumber(high, 2)} S/m`]} /></div>
      </div>
      <div className="gt-side">
        <ShapeTable shapes={shapes} selected={selected} range={truth.scale} onSelect={onSelect} onChange={change} onRemove={remove} issueAt={issueAt} />
        <ShapeSteppers shapes={shapes} selected={selected} range={truth.scale} onSelect={onSelect} onChange={change} onRemove={remove} issueAt={issueAt} />
        <div className="add">
          <span className="sm">Add</span>
          {(Object.keys(shapeNames) as ShapeKind[]).map((kind) => <Button key={kind} disabled={shapes.length >= limits.shapes} onClick={() => add(kind)}>{shapeNames[kind]}</Button>)}
        </div>
        <p className="sm only-d inset">Drag a shape by its body, its size by the square handles, its angle by the ring. Arrow keys move it by 1 mm. Later rows lie on top.</p>
        <div className="inset bgf">{backgroundField}</div>
        <FactList
          className="inset"
          facts={[
            ['Range of the truth', truth.range ? `${formatNumber(truth.range[0], 3)} to ${formatNumber(truth.range[1], 3)} S/m` : '–'],
            ['Nearest gap to the edge', gap === null ? 'no shapes' : gap < 4 ? <span style={{ color: 'var(--brick)' }}>{gap.toFixed(0)} mm; keep 4 mm or more</span> : `${gap.toFixed(0)} mm`],
            ['Declared targets', targets ? `${targets}, each scored for position and resolution` : 'none; position error is not scored'],
          ]}
        />
      </div>
    </div>
  );
}

/** Electrode layout of the form, for pictures. */
export function layoutOf(form: { electrodes: number; coverage: string; firstElectrodeDeg: string; numbering: string }): ElectrodeLayout {
  const coverage = parseDecimal(form.coverage) / 100;
  const firstDeg = parseDecimal(form.firstElectrodeDeg);
  return { count: form.electrodes, coverage: coverage > 0 && coverage < 1 ? coverage : 0.5, firstDeg: Number.isFinite(firstDeg) ? firstDeg : 90, clockwise: form.numbering === 'clockwise' };
}
