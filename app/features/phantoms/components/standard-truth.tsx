import { BodyImage } from '../../../components/images/body-image';
import { Formula } from '../../../components/ui/formula';
import { FactList } from '../../../components/ui/layout';
import { formatNumber } from '../../../lib/format';
import { plainNumber } from '../../../lib/problem-words';
import { equationOf } from '../../../../solvers/problems/integral-equation/equations';
import { equationSetting } from '../model/geometry/integral-equation';
import type { FormPart } from './form-part';
import type { TruthPicture } from './use-truth-picture';

/** The solution that the equation was published with. */
export function StandardTruth({ form, truth, backgroundField }: FormPart & { truth: TruthPicture; backgroundField: React.ReactNode }) {
  const equation = equationOf(equationSetting(form.equation));
  const [low, high] = truth.scale;
  return (
    <div className="sheet gt">
      <div><BodyImage label={`Published solution of ${equation.name}`} picture={truth.picture} low={low} high={high} /></div>
      <div className="gt-form">
        <div className="fbox" tabIndex={0} role="region" aria-label="Formula of the solution"><Formula tex={equation.solutionFormula} /></div>
        {backgroundField}
        <FactList
          facts={[
            ['Equation', equation.name],
            ['Interval', `${plainNumber(equation.from)} to ${plainNumber(equation.to)}`],
            ['Range of the truth', truth.range ? `${formatNumber(truth.range[0], 3)} to ${formatNumber(truth.range[1], 3)}` : '–'],
            ['Source', equation.sources.map((s) => s.short).join('; ')],
          ]}
        />
      </div>
    </div>
  );
}
