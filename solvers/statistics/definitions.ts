import type { Source } from '../core/types';

/** A statistic over draws, phantoms or methods, as the reference page explains it. */
export interface StatisticDefinition {
  readonly key: string;
  readonly name: string;
  /** What is compared or summarised, and over what. */
  readonly over: string;
  readonly formula: string;
  readonly summary: string;
  readonly traps: readonly string[];
  readonly sources: readonly Source[];
}

const demsar: Source = { short: 'Demšar 2006', full: 'J. Demšar, Statistical comparisons of classifiers over multiple data sets, J. Mach. Learn. Res. 7 (2006) 1-30.' };
const source = (short: string, full: string): Source => ({ short, full, fromMemory: true });

const friedman: StatisticDefinition = {
  key: 'friedman', name: 'Friedman test of mean ranks', over: 'methods over phantoms; one figure a phantom',
  formula: '\\chi^2_F = \\frac{12 n}{k (k+1)} \\frac{\\sum_j \\left(R_j - \\frac{k+1}{2}\\right)^2}{1 - \\frac{\\sum (t^3 - t)}{n (k^3 - k)}}, \\qquad F_F = \\frac{(n-1)\\,\\chi^2_F}{n (k-1) - \\chi^2_F}',
  summary: 'Whether the k methods have different ranks over n phantoms at all. A phantom is one block: its figure is the median over the draws of a level, or the mean of the medians over the ladder.',
  traps: [
    'Blocks: the draws of one phantom share its truth, so many draws do not make many phantoms. They are compared within the phantom, under that name.',
    'Few phantoms: the F of an order that is the same in every phantom is infinite, whatever their number. Where the orders can be counted (50 phantoms with two methods, 24 with three, 12 with four, seven with five, three with six) p is counted out instead.',
    'Too few phantoms: with n phantoms p cannot fall below (1/k!)^(n-1). Where that, or the largest difference of mean ranks, does not reach 5 %, no test is given and no winner is named.',
    'Ties: the correction in the denominator is that of scipy; the formula in Demšar 2006 has none.',
    'An undefined figure counts as the worst.',
  ],
  sources: [
    demsar, source('Friedman 1937', 'M. Friedman, The use of ranks to avoid the assumption of normality implicit in the analysis of variance, J. Amer. Statist. Assoc. 32 (1937) 675-701.'),
    source('Iman and Davenport 1980', 'R. L. Iman, J. M. Davenport, Approximations of the critical region of the Friedman statistic, Comm. Statist. A 9 (1980) 571-595.'),
  ],
};

const nemenyi: StatisticDefinition = {
  key: 'nemenyi', name: 'Critical difference and tie groups', over: 'methods over phantoms, after Friedman’s test',
  formula: '\\mathrm{CD} = q_{\\alpha,k} \\sqrt{\\frac{k (k+1)}{6 n}}',
  summary: 'Mean ranks further apart than this differ at the 5 % level. A bracket holds the methods within this distance of its best; the brackets of the table and the bars of the strip come from the same numbers.',
  traps: [
    'No relation that carries over: the first and the last of neighbouring brackets may be inseparable from a method between them. A bracket is tied to its best member.',
    'It depends on the others: entering another method changes k, and with it every distance.',
    'Before it stands the test: where Friedman’s test does not reject, all methods share one bracket.',
  ],
  sources: [demsar, source('Nemenyi 1963', 'P. B. Nemenyi, Distribution-free multiple comparisons, PhD thesis, Princeton University, 1963.')],
};

const wilcoxon: StatisticDefinition = {
  key: 'wilcoxon-holm', name: 'Signed ranks of pairs, corrected', over: 'two methods over phantoms, or over the draws of one phantom',
  formula: 'T = \\min\\Big(\\sum_{d_i > 0} r_i + \\tfrac12 \\sum_{d_i = 0} r_i,\\; \\sum_{d_i < 0} r_i + \\tfrac12 \\sum_{d_i = 0} r_i\\Big), \\qquad p^{\\mathrm{Holm}}_{(i)} = \\max_{j \\le i} \\min\\big(1, (m - j + 1)\\, p_{(j)}\\big)',
  summary: 'Whether two methods differ, from the ranks of their paired differences; with Holm’s correction over all m pairs compared.',
  traps: [
    'Zeros: their ranks are split between the two sums, as in Demšar 2006 (zsplit in scipy). Other programs leave them out.',
    'p: up to 50 pairs all sign patterns of the differences that are not zero are counted, on the ranks as they are; beyond, the normal approximation without continuity correction.',
    'Too few pairs: n differences of one sign have p = 2^(1-n), so one comparison needs six, and m comparisons more.',
  ],
  sources: [
    source('Wilcoxon 1945', 'F. Wilcoxon, Individual comparisons by ranking methods, Biometrics Bulletin 1 (1945) 80-83.'),
    source('Holm 1979', 'S. Holm, A simple sequentially rejective multiple test procedure, Scand. J. Statist. 6 (1979) 65-70.'), demsar,
  ],
};

const bootstrap: StatisticDefinition = {
  key: 'paired-bootstrap', name: 'Ratio of errors with a paired bootstrap', over: 'two methods over phantoms and draws',
  formula: '\\rho = \\exp\\Big(\\frac1n \\sum_{p=1}^{n} \\ln \\frac{\\mathrm{med}_d\\, E_1(p, d)}{\\mathrm{med}_d\\, E_2(p, d)}\\Big)',
  summary: 'How many times the error of one method is that of another, with a 95 % percentile interval: phantoms are drawn with replacement, then the draws of each. Both methods get the same resamples.',
  traps: [
    'Few phantoms: the interval is too short. Where phantoms alone scatter it covers the true ratio 92 times of 100 with twelve phantoms, 81 with four and 73 with three (a simulation of this registry).',
    'Scattering draws: the medians of phantoms scatter with their draws already, so drawing draws again makes the interval longer than needed, never shorter.',
    'One phantom: its draws alone are resampled, and the interval speaks about that phantom.',
    'Seeded: 1,000 resamples from the seed of the bench, so the interval is the same whenever it is computed.',
  ],
  sources: [
    source('Efron 1979', 'B. Efron, Bootstrap methods: another look at the jackknife, Ann. Statist. 7 (1979) 1-26.'),
    source('Davison and Hinkley 1997', 'A. C. Davison, D. V. Hinkley, Bootstrap Methods and their Application, Cambridge University Press, 1997, section 3.8.'),
  ],
};

const profile: StatisticDefinition = {
  key: 'performance-profile', name: 'Performance profile', over: 'methods over problems; a problem is a phantom at a noise level',
  formula: '\\rho_s(\\tau) = \\frac{1}{|P|}\\, \\Big|\\Big\\{ p \\in P : \\frac{E_{p,s}}{\\min_r E_{p,r}} \\le \\tau \\Big\\}\\Big|',
  summary: 'The share of problems in which a method’s error is within a factor of the best one’s. At 1: how often it is the best. Far right: how often it gives an answer at all.',
  traps: [
    'The best of those entered: another entry changes every ratio, and two methods must not be ranked against each other by their distance to a third.',
    'Problems: levels below the model-error floor are left out, and each phantom counts once a level, with its median over draws.',
    'Errors only: a ratio of scores such as a correlation has no such meaning.',
  ],
  sources: [source('Dolan and Moré 2002', 'E. D. Dolan, J. J. Moré, Benchmarking optimization software with performance profiles, Math. Program. 91 (2002) 201-213.')],
};

const pareto: StatisticDefinition = {
  key: 'error-time-front', name: 'Front of error and time', over: 'methods at one noise',
  formula: 's \\in \\text{front} \\iff \\nexists\\, r:\\; E_r \\le E_s,\\; t_r \\le t_s,\\; (E_r, t_r) \\ne (E_s, t_s)',
  summary: 'The methods that no other one beats in both the median error and the seconds per reconstruction. Equal ones stand on it together; a method without a time is named beside the chart and not placed.',
  traps: ['Time is of this server: it depends on the machine and on what else ran. The ratio to truncated singular values, timed in the same worker, carries further.', 'Preparation is not in it: factorisations are paid once and not counted.'],
  sources: [{ short: 'Common practice', full: 'The order of Pareto; common practice, no single source.' }],
};

const moments: StatisticDefinition = {
  key: 'bias-variance', name: 'Bias, variance and their sum', over: 'the reconstructions of one level of a run',
  formula: 'B^2 = \\frac{\\|\\bar x - x\\|_2^2}{\\|x - x_b\\|_2^2}, \\quad V = \\frac{1}{D} \\sum_{d=1}^{D} \\frac{\\|\\hat x_d - \\bar x\\|_2^2}{\\|x - x_b\\|_2^2}, \\quad B^2 + V = \\frac1D \\sum_d E_2(d)^2',
  summary: 'What stays wrong in every draw, and what the noise moves. Their sum is the mean of the squared relative L2 errors of the draws. Regularisation trades one for the other.',
  traps: [
    'Squares: a bias of 0.25 here is an error of one half. The root of the sum stands beside the relative L2.',
    'Finite draws: the mean image still holds 1/D of the variance, so the squared bias is too large by V/(D - 1) on average. With 24 draws that is 4 % of the variance.',
    'V is divided by D, not D - 1: only then the two add up.',
    'Draws without a finite image are left out and counted.',
  ],
  sources: [source('Geman, Bienenstock, Doursat 1992', 'S. Geman, E. Bienenstock, R. Doursat, Neural networks and the bias/variance dilemma, Neural Comput. 4 (1992) 1-58.'), { short: 'Definition of this registry', full: 'Dividing by the distance of the truth to the background is the choice of this registry.' }],
};

export const statistics: readonly StatisticDefinition[] = [friedman, nemenyi, wilcoxon, bootstrap, profile, pareto, moments];
