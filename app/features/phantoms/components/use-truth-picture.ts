import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import type { Picture } from '../../../components/images/pixels';
import { parseDecimal, shiftDecimal } from '../../../lib/decimal';
import { decodeArray } from '../../../../shared/domain/array-encoding';
import type { compileExpression } from '../../../../solvers/core/expression';
import { equationOf } from '../../../../solvers/problems/integral-equation/equations';
import type { FamilyKey } from '../../../../shared/domain/families';
import { getArrayQueryOptions } from '../api/get-phantom';
import { formBody } from '../model/form-geometry';
import { equationInterval, equationSetting, type EquationSetting } from '../model/geometry/integral-equation';
import type { PhantomForm } from '../model/phantom-form';
import { rasterFunction, rasterShapes, valueRange } from '../model/raster';
import { arrayPicture, bodyGrid, colourRange, linePicture, pictureSide } from '../model/truth-picture';
import { valueBounds } from '../model/truth-request';

export interface TruthPicture {
  /** Null while there is nothing to draw. */
  readonly picture: Picture | null;
  readonly range: readonly [number, number] | null;
  /** Ends of the colour scale. */
  readonly scale: readonly [number, number];
  /** What is wrong with the expression, with its place. */
  readonly error: string | null;
}

interface LineText {
  readonly interval: readonly [number, number];
  readonly solution: EquationSetting;
}
type Compile = typeof compileExpression;

/** The expression in x and y, refusing values that the family does not admit. */
function planeExpression(compile: Compile, expression: string, family: FamilyKey): (x: number, y: number) => number {
  const evaluate = compile(expression, ['x', 'y', 'r', 'theta']);
  const { minimum, maximum } = valueBounds(family);
  const variables = new Float64Array(4);
  return (x, y) => {
    variables.set([x, y, Math.hypot(x, y), Math.atan2(y, x)]);
    const value = evaluate(variables);
    if (value >= minimum && value <= maximum) return value;
    const place = `x = ${Number(x.toPrecision(4))} m, y = ${Number(y.toPrecision(4))} m`;
    throw new RangeError(`The expression gives ${value} at ${place}; it must lie between ${minimum} and ${maximum}.`);
  };
}

/** The ground truth of the form as a picture, and what the expression's reader says. mathjs is fetched when it is first needed. */
export function useTruthPicture(form: PhantomForm): TruthPicture {
  const reader = useQuery({
    queryKey: ['module', 'expression'], queryFn: () => import('../../../../solvers/core/expression'), enabled: form.truthKind === 'expression', staleTime: Infinity, structuralSharing: false,
  });
  const sha256 = form.truthKind === 'array' ? (form.array?.sha256 ?? '') : '';
  const array = useQuery({ ...getArrayQueryOptions(sha256), enabled: sha256 !== '' });
  const compile = reader.data?.compileExpression;
  const { family, truthKind, shapes, combine, expression, background: backgroundText, extent, scale: scaleText, offset: offsetText } = form;
  // Text compares by content, so that typing elsewhere draws nothing anew.
  const bodyText = JSON.stringify(formBody(form));
  const solution = equationSetting(form.equation);
  const lineText = JSON.stringify({ interval: equationInterval(solution), solution } satisfies LineText);
  const stored = array.data;
  return useMemo(() => {
    const background = parseDecimal(backgroundText);
    const body = JSON.parse(bodyText) as ReturnType<typeof formBody>;
    const done = (picture: Picture | null, error: string | null = null): TruthPicture => {
      const range = picture ? valueRange(picture.values) : null;
      return { picture, range, scale: colourRange(range, Number.isFinite(background) ? background : 1), error };
    };
    const fault = (cause: unknown): TruthPicture => done(null, cause instanceof Error ? cause.message : String(cause));
    if (family === 'integral-equation') {
      const { interval, solution } = JSON.parse(lineText) as LineText;
      const line = equationOf(solution);
      try {
        if (truthKind === 'standard') return done(linePicture(interval, (x) => line.solution(x)));
        if (!compile || !expression.trim()) return done(null);
        const evaluate = compile(expression, ['x']);
        return done(linePicture(interval, (x) => evaluate(Float64Array.of(x))));
      } catch (cause) {
        return fault(cause);
      }
    }
    if (!body || !Number.isFinite(background)) return done(null);
    const grid = bodyGrid(body, pictureSide);
    if (truthKind === 'shapes') return done({ grid, values: rasterShapes(shapes, background, family === 'electrical-impedance' ? 'replace' : combine, body, grid) });
    if (truthKind === 'expression') {
      if (!compile || !expression.trim()) return done(null);
      try {
        return done({ grid, values: rasterFunction(planeExpression(compile, expression, family), body, grid) });
      } catch (cause) {
        return fault(cause);
      }
    }
    const place = { xMin: shiftDecimal(parseDecimal(extent.xMin), -3), xMax: shiftDecimal(parseDecimal(extent.xMax), -3), yMin: shiftDecimal(parseDecimal(extent.yMin), -3), yMax: shiftDecimal(parseDecimal(extent.yMax), -3) };
    const scale = parseDecimal(scaleText);
    const offset = parseDecimal(offsetText);
    if (!stored || !Object.values(place).every(Number.isFinite) || !Number.isFinite(scale) || !Number.isFinite(offset)) return done(null);
    const [rows = 0, cols = 0] = stored.values.shape;
    return done(arrayPicture(decodeArray(stored.values), rows, cols, place, body, background, scale, offset));
  }, [family, truthKind, shapes, combine, expression, backgroundText, bodyText, lineText, extent, scaleText, offsetText, compile, stored]);
}
