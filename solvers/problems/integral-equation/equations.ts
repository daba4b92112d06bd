/** The integral equations. One line an equation. */
import type { EquationKey, IntegralEquationGeometry } from '../../../shared/domain/geometry/integral-equation';
import { baart } from './baart';
import type { EquationFactory, IntegralEquation } from './equation';
import { foxGoodwin } from './fox-goodwin';
import { gravity } from './gravity';
import { inverseHeat } from './inverse-heat';
import { phillips } from './phillips';
import { secondDerivative } from './second-derivative';
import { shaw } from './shaw';

const factories: Record<EquationKey, EquationFactory> = {
  phillips,
  shaw,
  gravity,
  'second-derivative': secondDerivative,
  baart,
  'fox-goodwin': foxGoodwin,
  'inverse-heat': inverseHeat,
};

/** The equation of a geometry, with its depth or diffusivity. */
export const equationOf = (geometry: Pick<IntegralEquationGeometry, 'equation' | 'depth' | 'diffusivity'>): IntegralEquation => factories[geometry.equation](geometry);
