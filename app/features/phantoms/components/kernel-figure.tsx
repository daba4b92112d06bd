import { useEffect, useRef } from 'react';
import { colourMap } from '../../../components/images/colour-maps';
import { Formula } from '../../../components/ui/formula';
import { plainNumber } from '../../../lib/problem-words';
import { useTheme } from '../../../lib/theme';
import type { IntegralEquationGeometry } from '../../../../shared/domain/geometry/integral-equation';
import { equationOf } from '../../../../solvers/problems/integral-equation/equations';

const side = 120;

/** The kernel K(s, t) as a picture, t to the right and s upwards, over its formula. */
export function KernelFigure({ geometry }: { geometry: IntegralEquationGeometry }) {
  const canvas = useRef<HTMLCanvasElement>(null);
  const dark = useTheme() === 'dark';
  const equation = equationOf(geometry);
  useEffect(() => {
    const context = canvas.current?.getContext('2d');
    if (!canvas.current || !context) return;
    const { kernel, from, to, dataFrom, dataTo } = equationOf(geometry);
    const values = Array.from({ length: side * side }, (_, p) => kernel(dataTo - ((Math.floor(p / side) + 0.5) * (dataTo - dataFrom)) / side, from + (((p % side) + 0.5) * (to - from)) / side));
    const low = Math.min(...values);
    const high = Math.max(...values);
    canvas.current.width = canvas.current.height = side;
    const image = context.createImageData(side, side);
    const colours = colourMap('sequential', dark);
    values.forEach((v, p) => image.data.set([...(colours[Math.round(((v - low) / (high - low || 1)) * 255)] ?? [0, 0, 0]), 255], 4 * p));
    context.putImageData(image, 0, 0);
  }, [geometry, dark]);
  return (
    <div className="kernel">
      <div role="img" aria-label={`Kernel of ${equation.name} as a picture`}><canvas ref={canvas} aria-hidden="true" /></div>
      <p className="sm centre">t from {plainNumber(equation.from)} to {plainNumber(equation.to)} to the right, s from {plainNumber(equation.dataFrom)} to {plainNumber(equation.dataTo)} upwards; dark is low</p>
      <div className="fbox" tabIndex={0} role="region" aria-label="Formula of the kernel"><Formula tex={equation.kernelFormula} /></div>
    </div>
  );
}
