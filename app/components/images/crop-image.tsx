import { useEffect, useRef } from 'react';
import { useTheme } from '../../lib/theme';
import { colourMap, type MapName } from './colour-maps';
import { LineImage } from './line-image';
import { bodyOf, valueAt, type Picture } from './pixels';

interface CropProps {
  label: string;
  picture: Picture;
  map?: MapName;
  low: number;
  high: number;
  centre: { x: number; y: number };
  halfWidth: number;
  mark?: { x: number; y: number };
}

/** A window into a picture, with the target mark at its place: a square, or of a curve the stretch around it. Half-width and centre in m. */
export function CropImage(props: CropProps) {
  const body = bodyOf(props.picture.grid);
  if (body.kind !== 'interval') return <CropSquare {...props} />;
  const { centre, halfWidth, ...rest } = props;
  return <LineImage {...rest} body={body} window={[Math.max(body.from, centre.x - halfWidth), Math.min(body.to, centre.x + halfWidth)]} />;
}

function CropSquare({ label, picture, map = 'sequential', low, high, centre, halfWidth, mark }: CropProps) {
  const canvas = useRef<HTMLCanvasElement>(null);
  const dark = useTheme() === 'dark';
  const { x: cx, y: cy } = centre;
  useEffect(() => {
    const node = canvas.current;
    const context = node?.getContext('2d');
    if (!node || !context) return;
    const side = 60;
    node.width = node.height = side;
    const colours = colourMap(map, dark);
    const image = context.createImageData(side, side);
    for (let j = 0; j < side; j++) {
      for (let i = 0; i < side; i++) {
        const v = valueAt(picture, cx - halfWidth + (2 * halfWidth * (i + 0.5)) / side, cy + halfWidth - (2 * halfWidth * (j + 0.5)) / side);
        if (v === null) continue;
        const colour = colours[Math.min(255, Math.max(0, Math.round(((v - low) / (high - low)) * 255)))] ?? [0, 0, 0];
        image.data.set([...colour, 255], 4 * (j * side + i));
      }
    }
    context.putImageData(image, 0, 0);
  }, [picture, map, low, high, cx, cy, halfWidth, dark]);
  return (
    <div className="z" role="img" aria-label={label}>
      <canvas ref={canvas} aria-hidden="true" />
      {mark ? (
        <svg viewBox="-50 -50 100 100" aria-hidden="true">
          <g transform={`translate(${((mark.x - cx) / halfWidth) * 50} ${(-(mark.y - cy) / halfWidth) * 50})`} fill="none">
            {[['#fff', 3.4], ['#14201f', 1.4]].map(([stroke, width]) => (
              <g key={stroke} stroke={String(stroke)} strokeWidth={width}><path d="M-16 0H-8M8 0H16M0-16V-8M0 8V16" /><circle r="8" /></g>
            ))}
          </g>
        </svg>
      ) : null}
    </div>
  );
}
