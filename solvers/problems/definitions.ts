/** What the families of problems compute, for the reference page: the model, how data are made, how they are inverted, and the conventions. */
import { equationKeys } from '../../shared/domain/geometry/integral-equation';
import { familyNames, type FamilyKey } from '../../shared/domain/families';
import type { Source } from '../core/types';
import { pointSpreadKeys } from '../../shared/domain/geometry/deblurring';
import { pointSpreadOf, pointSpreadWords } from './deblurring/point-spread';
import { equationOf } from './integral-equation/equations';

export interface ProblemDefinition {
  readonly key: string;
  readonly name: string;
  readonly family: FamilyKey;
  readonly summary: string;
  /** LaTeX. */
  readonly formula: string;
  /** Label and text. */
  readonly facts: readonly (readonly [string, string])[];
  readonly conventions: readonly string[];
  readonly sources: readonly Source[];
}

const memory = (short: string, full: string): Source => ({ short, full, fromMemory: true });

type FamilyText = Omit<ProblemDefinition, 'key' | 'name' | 'family'>;
const texts: Record<FamilyKey, FamilyText> = {
  'electrical-impedance': {
    summary: 'Conductivity inside a disc or a smooth star-shaped body from voltages on 8 to 64 electrodes, under the complete electrode model..',
    formula: '\\nabla\\cdot(\\sigma \\nabla u) = 0, \\quad u + z_l\\, \\sigma \\partial_\\nu u = U_l \\text{ on } e_l, \\quad \\int_{e_l} \\sigma \\partial_\\nu u = I_l, \\quad \\sigma \\partial_\\nu u = 0 \\text{ elsewhere}, \\quad \\sum_l U_l = 0',
    facts: [
      ['Unknown', 'conductivity, S/m, constant on about 1,600 cells'],
      ['Data', 'voltages, V, absolute or as the difference to a reference frame of the background'],
      ['Simulated by', 'boundary integral equations with panels graded to the electrode ends where shapes and body are smooth, else quadratic isoparametric elements on a mesh graded to the electrode ends'],
      ['Inverted by', 'quadratic elements on a mesh of its own, exact derivative of the discrete model by the adjoint formula'],
      ['Floor', 'gap of the two models on the background over the norm that the noise is relative to'],
    ],
    conventions: [
      'Currents per unit height, A/m: the model is two-dimensional. Contact impedance in ohm m^2.',
      'Trigonometric patterns: cos k theta for k = 1 to L/2, then sin k theta for k = 1 to L/2 - 1 (Isaacson 1986).',
      'Noise levels are relative to the raw voltages or to the difference signal; the phantom says which, and every page repeats it.',
      'Adjacent drive and measurement without the driven electrodes: L (L - 3) values, half of them independent by reciprocity.',
    ],
    sources: [
      memory('Somersalo, Cheney, Isaacson 1992', 'E. Somersalo, M. Cheney, D. Isaacson: Existence and uniqueness for electrode models for electric current computed tomography. SIAM Journal on Applied Mathematics 52 (1992) 1023-1040.'),
      memory('Isaacson 1986', 'D. Isaacson: Distinguishability of conductivities by electric current computed tomography. IEEE Transactions on Medical Imaging MI-5 (1986) 91-95.'),
    ],
  },
  'x-ray': {
    summary: 'Attenuation inside a disc from its line integrals along parallel or fan beams, with all, few or a limited range of views.',
    formula: 'y_{v,d} = \\frac{1}{|w|}\\int_{w_d} \\int_{L(v, s)} x \\,\\mathrm d\\ell \\,\\mathrm d s',
    facts: [
      ['Unknown', 'attenuation, 1/m, constant on square cells'],
      ['Data', 'line integrals, pure numbers'],
      ['Simulated by', 'closed forms for ellipses, annuli and polygons along each ray; fine quadrature for smooth truths; another projector on a finer grid for images'],
      ['Inverted by', 'the lengths of rays in cells (Siddon 1985) with the exact adjoint'],
      ['Floor', 'gap of the two models on the ground truth averaged over the cells'],
    ],
    conventions: [
      'Views stand at equal steps from the first angle; a full turn does not repeat the first one.',
      'Shapes lie on top of one another, or add up as tables of ellipses are printed: the phantom says which.',
    ],
    sources: [
      memory('Kak and Slaney 1988', 'A. C. Kak, M. Slaney: Principles of Computerized Tomographic Imaging. IEEE Press, 1988.'),
      memory('Siddon 1985', 'R. L. Siddon: Fast calculation of the exact radiological path for a three-dimensional CT array. Medical Physics 12 (1985) 252-255.'),
    ],
  },
  'integral-equation': {
    summary: 'A function of one variable from an integral of the first kind: published test equations, mildly to severely ill-posed.',
    formula: 'g(s) = \\int_a^b K(s, t)\\, f(t)\\,\\mathrm d t',
    facts: [
      ['Unknown', 'a function, pure number, constant on equal cells'],
      ['Data', 'the right-hand side at equal points, pure numbers'],
      ['Simulated by', 'closed forms where they exist, else composite Gauss-Legendre quadrature at least four times finer'],
      ['Inverted by', 'box functions on the cells'],
      ['Floor', 'gap of the two models on the solution averaged over the cells'],
    ],
    conventions: ['Errors weigh cells by their width, as the L2 norm over the interval does.', 'Figures for images (SSIM, targets) are not defined on a line; peak position and width are.'],
    sources: equationSources(),
  },
  deblurring: {
    summary: 'An image from its convolution with a point-spread function, recorded on the picture only.',
    formula: 'y(p) = \\int k(p - q)\\, x(q)\\,\\mathrm d q',
    facts: [
      ['Unknown', 'intensity, pure number, on square pixels'],
      ['Data', 'the blurred picture on the same pixels'],
      ['Simulated by', 'the same blur on a larger field with finer sampling, so that light from beyond the edge is there'],
      ['Inverted by', 'a discrete convolution with zero, periodic or reflective edge and the exact adjoint'],
      ['Floor', 'gap of the two models on the ground truth averaged over the pixels'],
    ],
    conventions: ['The point-spread function has unit sum.', 'What the inversion assumes beyond the edge is wrong on purpose in two of three cases: the picture does not know what lies outside.'],
    sources: [memory('Hansen, Nagy, O\'Leary 2006', 'P. C. Hansen, J. G. Nagy, D. P. O\'Leary: Deblurring Images: Matrices, Spectra, and Filtering. SIAM, 2006.')],
  },
};

function equationSources(): Source[] {
  const sources = new Map<string, Source>();
  for (const equation of equationKeys) for (const source of equationOf({ equation }).sources) sources.set(source.full, source);
  return [...sources.values()];
}

/** Families, then the equations and the point-spread functions one by one. */
export function problemDefinitions(): ProblemDefinition[] {
  const families = (Object.keys(texts) as FamilyKey[]).map((family) => ({ key: family, family, name: familyNames[family].name, ...texts[family] }));
  const equations = equationKeys.map((equation): ProblemDefinition => {
    const { name, line, from, to, dataFrom, dataTo, kernelFormula, solutionFormula, dataFormula, sources } = equationOf({ equation });
    return {
      key: equation, family: 'integral-equation', name, summary: line, sources,
      formula: `\\begin{gathered} ${[kernelFormula, solutionFormula, ...(dataFormula ? [dataFormula] : [])].join(' \\\\ ')} \\end{gathered}`,
      facts: [
        ['Unknown on', `${round(from)} to ${round(to)}`], ['Data on', `${round(dataFrom)} to ${round(dataTo)}`],
        ['Right-hand side', dataFormula ? 'closed form' : 'quadrature, another rule and finer'],
      ],
      conventions: [],
    };
  });
  const spreads = pointSpreadKeys.map((pointSpread): ProblemDefinition => {
    const { name, line, inverted } = pointSpreadWords[pointSpread];
    const { formula } = pointSpreadOf({ body: { kind: 'rectangle', width: 1, height: 1 }, pointSpread, spread: 0.1, cells: 32, edge: 'zero' });
    return {
      key: `point-spread-${pointSpread}`, family: 'deblurring', name, summary: line, formula,
      facts: [['Simulated by', 'the exact response of each pixel to samples of a larger field'], ['Inverted by', inverted]],
      conventions: [], sources: texts.deblurring.sources,
    };
  });
  return [...families, ...equations, ...spreads];
}

const round = (value: number): string => String(Number(value.toPrecision(5)));
