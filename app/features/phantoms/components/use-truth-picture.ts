import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import type { Picture } from '../../../components/images/pixels';
import { parseDecimal, shiftDecimal } from '../../../lib/decimal';
import { decodeArray } from '../../../../shared/domain/array-encoding';
import { getArrayQueryOptions } from '../api/get-phantom';
import type { PhantomForm } from '../model/phantom-form';
import { rasterFunction, rasterShapes, valueRange } from '../model/raster';
import { arrayPicture, bodyGrid, colourRange, pictureSide } from '../model/truth-picture';

export interface TruthPicture {
  readonly picture: Picture | null;
  readonly range: readonly [number, number] | null;
  /** Ends of the colour scale. */
  readonly scale: readonly [number, number];
  /** What is wrong with the expression, with its place. */
  readonly error: string | null;
}

/** The ground truth of the form as a picture, and what the expression's reader says. mathjs is fetched when it is first needed. */
export function useTruthPicture(form: PhantomForm): TruthPicture {
  const reader = useQuery({
    queryKey: ['module', 'truth-expression'], queryFn: () => import('../../../../solvers/truth/expression'), enabled: form.truthKind === 'expression', staleTime: Infinity, structuralSharing: false,
  });
  const sha256 = form.truthKind === 'array' ? (form.array?.sha256 ?? '') : '';
  const array = useQuery({ ...getArrayQueryOptions(sha256), enabled: sha256 !== '' });
  const expressionField = reader.data?.expressionField;
  const { truthKind, shapes, expression, background: backgroundText, radius: radiusText, extent, scale: scaleText, offset: offsetText } = form;
  const stored = array.data;
  return useMemo(() => {
    const background = parseDecimal(backgroundText);
    const mm = parseDecimal(radiusText);
    const radius = shiftDecimal(mm, -3);
    const usable = Number.isFinite(background) && mm > 0;
    const done = (picture: Picture | null, error: string | null = null): TruthPicture => {
      const range = picture ? valueRange(picture.values) : null;
      return { picture, range, scale: colourRange(range, Number.isFinite(background) ? background : 1), error };
    };
    if (!usable) return done(null);
    if (truthKind === 'shapes') return done({ grid: bodyGrid(radius), values: rasterShapes(shapes, background, mm, pictureSide) });
    if (truthKind === 'expression') {
      if (!expressionField || !expression.trim()) return done(null);
      try {
        const field = expressionField(expression, background);
        return done({ grid: bodyGrid(radius), values: rasterFunction((x, y) => field.valueAt(x, y), radius, pictureSide) });
      } catch (cause) {
        return done(null, cause instanceof Error ? cause.message : String(cause));
      }
    }
    const place = { xMin: shiftDecimal(parseDecimal(extent.xMin), -3), xMax: shiftDecimal(parseDecimal(extent.xMax), -3), yMin: shiftDecimal(parseDecimal(extent.yMin), -3), yMax: shiftDecimal(parseDecimal(extent.yMax), -3) };
    const scale = parseDecimal(scaleText);
    const offset = parseDecimal(offsetText);
    if (!stored || !Object.values(place).every(Number.isFinite) || !Number.isFinite(scale) || !Number.isFinite(offset)) return done(null);
    const [rows = 0, cols = 0] = stored.values.shape;
    return done(arrayPicture(decodeArray(stored.values), rows, cols, place, radius, background, scale, offset));
  }, [truthKind, shapes, expression, backgroundText, radiusText, extent, scaleText, offsetText, expressionField, stored]);
}
