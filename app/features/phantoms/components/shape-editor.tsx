import { useRef, type KeyboardEvent, type PointerEvent } from 'react';
import { z } from 'zod';
import { ColourBar, scaleTexts } from '../../../components/images/colour-bar';
import { bodyHalfSize } from '../../../components/images/body-outline';
import { BodyImage } from '../../../components/images/body-image';
import type { ElectrodeLayout } from '../../../components/images/electrode-layout';
import { Button } from '../../../components/ui/button';
import { FactList } from '../../../components/ui/layout';
import { useToast } from '../../../components/ui/toast';
import { formatNumber } from '../../../lib/format';
import { withUnit } from '../../../lib/problem-words';
import { limits } from '../../../../shared/domain/limits';
import { gapToEdge, moveShape, newShape, shapeNames, type DraftShape, type RoundOrRectangle, type ShapeKind } from '../model/draft-shape';
import { dragShape, type Grip } from '../model/shape-drag';
import { ShapeOverlay } from './shape-overlay';
import { ShapeSteppers, ShapeTable } from './shape-table';
import type { TruthPicture } from './use-truth-picture';

interface Props {
  readonly shapes: readonly DraftShape[];
  readonly onShapes: (update: (shapes: readonly DraftShape[]) => DraftShape[]) => void;
  readonly selected: string | null;
  readonly onSelect: (id: string | null) => void;
  /** Null while its fields cannot be read. */
  readonly body: RoundOrRectangle | null;
  readonly background: number;
  /** Unit of the values; '' for pure numbers. */
  readonly unit: string;
  readonly electrodes: ElectrodeLayout | null;
  readonly truth: TruthPicture;
  readonly issueAt: (path: string) => string | undefined;
  readonly backgroundField: React.ReactNode;
  /** How shapes that overlap are combined, in a sentence. */
  readonly order: string;
}

const gripSchema = z.union([z.object({ part: z.enum(['body', 'a', 'b', 'angle']) }), z.object({ part: z.literal('vertex'), index: z.int() })]);

function readGrip(target: EventTarget): { id: string; grip: Grip } | null {
  if (!(target instanceof SVGElement)) return null;
  const { shape, grip } = target.dataset;
  if (!shape || !grip) return null;
  const parsed = gripSchema.safeParse(JSON.parse(grip));
  return parsed.success ? { id: shape, grip: parsed.data } : null;
}

/** The picture and the typed table are the same data: drag by the body, handles and ring; arrow keys move by 1 mm. */
export function ShapeEditor({ shapes, onShapes, selected, onSelect, body, unit, background, electrodes, truth, issueAt, backgroundField, order }: Props) {
  const toast = useToast();
  const drag = useRef<{ start: DraftShape; grip: Grip; from: [number, number] } | null>(null);
  const change = (shape: DraftShape) => onShapes((all) => all.map((s) => (s.id === shape.id ? shape : s)));
  const current = shapes.find((s) => s.id === selected);

  const halfMm = body ? 1000 * Math.max(...bodyHalfSize(body)) : 100;
  const toMm = (e: PointerEvent<HTMLElement>): [number, number] => {
    const svg = e.currentTarget.querySelector('svg');
    const box = (svg ?? e.currentTarget).getBoundingClientRect();
    const [, , width = 206, height = 206] = (svg?.getAttribute('viewBox') ?? '').split(' ').map(Number);
    return [(((e.clientX - box.left) / (box.width || 1) - 0.5) * width * halfMm) / 100, (-((e.clientY - box.top) / (box.height || 1) - 0.5) * height * halfMm) / 100];
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
    const shape = newShape(kind, halfMm, background, shapes);
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

  const gaps = body ? shapes.map((s) => gapToEdge(s, body)).filter(Number.isFinite) : [];
  const gap = gaps.length ? Math.min(...gaps) : null;
  const targets = shapes.filter((s) => s.target).length;
  const [low, high] = truth.scale;
  return (
    <div className="sheet gt">
      <div>
        <div
          className="ed" tabIndex={0} role="group" aria-label={`Ground truth on the ${body?.kind === 'rectangle' ? 'picture' : body?.kind === 'star' ? 'body' : 'disc'}${current ? `, ${current.label} chosen at x ${current.x} mm, y ${current.y} mm` : ''}. Arrow keys move the chosen shape by 1 mm, with Shift by 10 mm; space chooses the next; Delete removes it.`}
          onPointerDown={onPointerDown} onPointerMove={onPointerMove} onPointerUp={end} onPointerCancel={end} onKeyDown={onKeyDown}
        >
          <BodyImage label={`Ground truth with ${shapes.length} shapes; their values are in the table beside it`} picture={truth.picture} body={body ?? undefined} low={low} high={high} electrodes={electrodes} numbered={electrodes !== null && electrodes.arcs.length <= 32}>
            <ShapeOverlay shapes={shapes} selected={selected} scale={100 / halfMm} />
          </BodyImage>
        </div>
        <div style={{ marginTop: 10 }}><ColourBar labels={scaleTexts(low, high, background, unit)} /></div>
      </div>
      <div className="gt-side">
        <ShapeTable shapes={shapes} selected={selected} range={truth.scale} unit={unit} onSelect={onSelect} onChange={change} onRemove={remove} issueAt={issueAt} />
        <ShapeSteppers shapes={shapes} selected={selected} range={truth.scale} unit={unit} onSelect={onSelect} onChange={change} onRemove={remove} issueAt={issueAt} />
        <div className="add">
          <span className="sm">Add</span>
          {(Object.keys(shapeNames) as ShapeKind[]).map((kind) => <Button key={kind} disabled={shapes.length >= limits.shapes} onClick={() => add(kind)}>{shapeNames[kind]}</Button>)}
        </div>
        <p className="sm only-d inset">Drag a shape by its body, its size by the square handles, its angle by the ring. Arrow keys move it by 1 mm. {order}</p>
        <div className="inset bgf">{backgroundField}</div>
        <FactList
          className="inset"
          facts={[
            ['Range of the truth', truth.range ? withUnit(`${formatNumber(truth.range[0], 3)} to ${formatNumber(truth.range[1], 3)}`, unit) : '–'],
            ['Nearest gap to the edge', gap === null ? 'no shapes' : electrodes === null ? (gap < 0 ? 'reaches beyond' : `${gap.toFixed(0)} mm`) : gap < 4 ? <span style={{ color: 'var(--brick)' }}>{gap.toFixed(0)} mm; keep 4 mm or more</span> : `${gap.toFixed(0)} mm`],
            ['Declared targets', targets ? `${targets}, each scored for position and resolution` : 'none; position error is not scored'],
          ]}
        />
      </div>
    </div>
  );
}
