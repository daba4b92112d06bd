import type { ReadableDefinition } from '../../../../shared/domain/phantom-definition';
import { BlurFigure } from './blur-figure';
import { ElectrodeFigure, hasCurrentLines } from './electrode-figure';
import { KernelFigure } from './kernel-figure';
import { XrayFigure } from './xray-figure';

/** Title of the figure, a remark behind it, the figure and what it leaves out. */
export function GeometryPanel({ definition }: { definition: ReadableDefinition }) {
  const { title, remark, note } = words(definition);
  return (
    <div>
      <h2>{title} <span>{remark}</span></h2>
      <GeometryFigure definition={definition} />
      {note ? <p className="sm centre">{note}</p> : null}
    </div>
  );
}

function GeometryFigure({ definition }: { definition: ReadableDefinition }) {
  switch (definition.family) {
    case 'electrical-impedance':
      return <ElectrodeFigure geometry={definition.geometry} truth={definition.truth} />;
    case 'x-ray':
      return <XrayFigure geometry={definition.geometry} truth={definition.truth} />;
    case 'integral-equation':
      return <KernelFigure geometry={definition.geometry} />;
    case 'deblurring':
      return <BlurFigure geometry={definition.geometry} truth={definition.truth} />;
  }
}

function words(definition: ReadableDefinition): { title: string; remark: string; note: string } {
  switch (definition.family) {
    case 'electrical-impedance': {
      const { geometry } = definition;
      const pair = geometry.pattern === 'trigonometric' || geometry.pattern === 'listed' ? 'first pattern shown' : 'first drive pair shown';
      const note = !hasCurrentLines(geometry)
        ? ''
        : geometry.pattern === 'trigonometric'
          ? 'Current lines are schematic: uniform disc, current cos θ along the edge, equal shares between them.'
          : 'Current lines are schematic: uniform disc, point electrodes. Beyond the outermost runs 1 % of the current, half beyond the seventh.';
      return { title: 'Geometry', remark: `${geometry.electrodes} electrodes, ${pair}`, note };
    }
    case 'x-ray':
      return { title: 'Geometry', remark: `${definition.geometry.views} views, the first shown`, note: definition.geometry.beam === 'fan' ? 'Marks: places of the source.' : 'Marks: directions of the detector.' };
    case 'integral-equation':
      return { title: 'Kernel', remark: 'of the equation', note: '' };
    case 'deblurring':
      return { title: 'Blur', remark: 'what a point becomes, to scale', note: definition.geometry.pointSpread === 'gaussian' ? 'Rings: one and two standard deviations.' : '' };
  }
}
