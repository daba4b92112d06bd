import { DataFrameChart } from '../../../components/charts/data-frame-chart';
import { DataMatrix } from '../../../components/charts/data-matrix';
import type { FamilyKey } from '../../../../shared/domain/families';
import type { Simulation } from '../../../../shared/contracts/simulations';
import { dataWords } from '../model/data-words';
import type { scaledFrame } from '../model/noisy-data';

interface Props {
  readonly family: FamilyKey;
  readonly simulation: Simulation;
  readonly data: ReturnType<typeof scaledFrame>;
  readonly label: string;
  /** One group only; null shows all. */
  readonly group: number | null;
  readonly height?: number;
}

/** Draw 1 as a picture, one row a group: a sinogram, or the blurred image in its own shape. */
export function DataPicture({ family, simulation, data, label, map = 'sequential' }: Omit<Props, 'group' | 'height'> & { map?: 'sequential' | 'diverging' }) {
  const words = dataWords[family];
  const { patterns, valuesPerPattern, grid } = simulation;
  const image = family === 'deblurring';
  return (
    <DataMatrix
      label={label} values={data.draw} rows={patterns} columns={valuesPerPattern} unit={data.unit} map={map} {...(image ? {} : { rowName: words.group, columnName: words.value.replace('measured between electrodes', 'measurement') })}
      aspect={image ? (grid.xMax - grid.xMin) / (grid.yMax - grid.yMin) : family === 'x-ray' ? 1.4 : undefined} fromBelow={image}
    />
  );
}

/** The data as lines: without noise, the range of 90 % of the draws, and draw 1 as dots. */
export function DataLines({ family, simulation, data, label, group, height }: Props) {
  const { group: groupWord, value } = dataWords[family];
  const single = simulation.patterns === 1 ? 0 : group;
  return (
    <DataFrameChart
      label={label} height={height} values={data.values} noiseBand={data.band} draw={data.draw} patternNames={simulation.patternNames} channelNames={simulation.channelNames}
      unit={data.unit} words={{ group: groupWord, value }} pattern={single}
    />
  );
}
