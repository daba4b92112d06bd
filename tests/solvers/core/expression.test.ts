import fc from 'fast-check';
import { evaluate } from 'mathjs';
import { describe, expect, it } from 'vitest';
import { compileExpression } from '../../../solvers/core/expression';

const names = ['x', 'y', 'r', 'theta'];
const at = (text: string, x = 0.3, y = -0.7): number => compileExpression(text, names)(Float64Array.of(x, y, Math.hypot(x, y), Math.atan2(y, x)));

describe('expressions', () => {
  it.each([
    '1 + 2 * x - y / 4', '-x^2', '2^-1', 'x^3 - 3 x y', '(x - y)^0.5 + 2', 'exp(-((x - 0.3)^2 + y^2) / 0.02)', 'x < 0.5 and y < 0 ? 4 : 1',
    '0 < x < 0.5 ? 2 : 1', 'x > 1 or not (y > 0)', 'min(x, y, 3) + max(1, x)', 'sin(pi x) cos(2 theta) + r', 'abs(y) + sqrt(2) + tanh(y) + log(2)', 'mod(-7, 3)',
    '1e-3 + .5 + 2.', 'atan2(y, x) - theta', 'pow(x, 1.7) + cbrt(8)', 'x == 0.3 ? 1 : 2', 'x != y ? e : pi', 'sign(y) * hypot(3, 4)', 'x ? (y ? 1 : 2) : 3',
  ])('%s has the value that mathjs gives', (text) => {
    const [x, y] = [0.3, -0.7];
    const expected = Number(evaluate(text, { x, y, r: Math.hypot(x, y), theta: Math.atan2(y, x) }));
    // Both evaluate in doubles; libraries for transcendental functions differ in the last bits only.
    expect(at(text)).toBeCloseTo(expected, 12);
  });

  it('knows step and heaviside as right-continuous', () => {
    expect([at('step(x - 0.3)'), at('step(x - 0.31)'), at('heaviside(y)')]).toEqual([1, 0, 0]);
  });

  it.each([
    ['import("fs")', /'import' at character 1/],
    ['x + process', /'process' at character 5/],
    ['x.constructor', /'\.' at character 2|'constructor'/],
    ['constructor', /'constructor' at character 1/],
    ['__proto__', /at character 1/],
    ['cos.constructor("return 1")()', /not allowed|not known/],
    ['x = 3', /'=' at character 3/],
    ['f(x) = x', /'f' at character 1/],
    ['[1, 2]', /'\[' at character 1/],
    ['{a: 1}', /'\{' at character 1/],
    ['"text"', /'"' at character 1/],
    ['x; y', /';' at character 2/],
    ['x\ny', /at character 2/],
    ['3 cm', /'cm' at character 3/],
    ['1:3', /Only one formula|cannot be read|range/i],
    ['x!', /'!' at character 2/],
    ["x'", /at character 2/],
    ['5 %', /'%' at character 3/],
    ['random()', /'random' at character 1/],
    ['eval(1)', /'eval'/],
    ['toString', /'toString'/],
    ['valueOf(1)', /'valueOf'/],
    ['sin', /is a function/],
    ['sin(x, y)', /sin takes 1 argument, not 2/],
    ['x(2)', /write x \*/],
    ['1e999', /too large/],
    ['(((', /cannot be read|nested/],
    ['', /empty/],
    ['x +', /cannot be read/],
    ['1'.repeat(501), /at most 500/],
    ['('.repeat(40) + 'x' + ')'.repeat(40), /nested more than 32/],
    ['-'.repeat(499) + 'x', /parts|nested/],
    ['2^'.repeat(249) + '2', /parts|nested/],
    ['x' + '+x'.repeat(240), /parts|nested/],
    ['αβ', /'α' at character 1/],
  ])('refuses %s', (text, message) => {
    expect(() => compileExpression(text, names)).toThrow(RangeError);
    expect(() => compileExpression(text, names)).toThrow(message);
  });

  it('never throws anything but RangeError, and always ends in a number', () => {
    const pieces = fc.constantFrom('x', 'y', 'r', '(', ')', '+', '-', '*', '/', '^', ',', 'sin', 'max', '1', '.5', '<', '?', ':', ' ', 'and', 'e', 'constructor', '[', '"', '=', '!', '%');
    fc.assert(
      fc.property(fc.array(pieces, { maxLength: 30 }), (parts) => {
        try {
          expect(typeof at(parts.join(''))).toBe('number');
        } catch (error) {
          expect(error).toBeInstanceOf(RangeError);
        }
      }),
      { numRuns: 2000 },
    );
  });
});
