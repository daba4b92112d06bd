import { useEffect, useRef } from 'react';
import { colourAt, colourMap } from '../../../components/images/colour-maps';
import { useTheme } from '../../../lib/theme';
import type { Simulation } from '../../../../shared/contracts/simulations';

/** The change from the reference as a matrix: patterns across, values within a pattern down, zero in the sheet's colour. */
export function ChangeMatrix({ simulation, className = 'mx' }: { simulation: Simulation; className?: string }) {
  const canvas = useRef<HTMLCanvasElement>(null);
  const dark = useTheme() === 'dark';
  useEffect(() => {
    const node = canvas.current;
    const context = node?.getContext('2d');
    if (!node || !context) return;
    const { patterns, valuesPerPattern, frame, reference } = simulation;
    node.width = patterns;
    node.height = valuesPerPattern;
    const image = context.createImageData(patterns, valuesPerPattern);
    const limit = simulation.largestChange || 1;
    const map = colourMap('diverging', dark);
    for (let k = 0; k < patterns; k++) {
      for (let i = 0; i < valuesPerPattern; i++) {
        const at = k * valuesPerPattern + i;
        image.data.set([...colourAt(map, frame[at]! - reference[at]!, -limit, limit), 255], (i * patterns + k) * 4);
      }
    }
    context.putImageData(image, 0, 0);
  }, [simulation, dark]);
  return <canvas ref={canvas} className={className} role="img" aria-label={`Change from the reference as a matrix, ${simulation.patterns} patterns by ${simulation.valuesPerPattern} values`} />;
}
