/** One method's ratios to the best method of each problem. */
export interface PerformanceProfile {
  readonly id: string;
  /** Ascending, those that are finite: the profile steps up by one problem at each. */
  readonly ratios: readonly number[];
}

export interface PerformanceProfiles {
  /** Problems in all; the profile at tau is the number of ratios up to tau over this. */
  readonly problems: number;
  /** Problems that no method solves; they count in `problems`. */
  readonly unsolved: number;
  readonly items: readonly PerformanceProfile[];
}

/**
 * Performance profiles (Dolan and More 2002): rho_s(tau) is the share of problems in which the loss of method s is at most tau times
 * the smallest one. The share at 1 is how often it is best (ties count for each); the share far right is how often it gives an answer.
 * Where the smallest loss is zero the methods that reach it have ratio 1 and the others none.
 * @param methods losses over the same problems, at least 0; Infinity where a method gives no answer
 * @throws RangeError for different numbers of problems, negative losses or NaN
 */
export function performanceProfiles(methods: readonly { readonly id: string; readonly losses: ArrayLike<number> }[]): PerformanceProfiles {
  const problems = methods[0]?.losses.length ?? 0;
  for (const { id, losses } of methods) {
    if (losses.length !== problems) throw new RangeError(`'${id}' has ${losses.length} problems, '${methods[0].id}' ${problems}.`);
    for (let p = 0; p < problems; p++) if (!(losses[p] >= 0)) throw new RangeError(`A profile needs losses from 0 up; '${id}' has ${losses[p]}.`);
  }
  const ratios: number[][] = methods.map(() => []);
  let unsolved = 0;
  for (let p = 0; p < problems; p++) {
    let best = Infinity;
    for (const { losses } of methods) best = Math.min(best, losses[p]);
    if (best === Infinity) {
      unsolved++;
      continue;
    }
    methods.forEach(({ losses }, m) => {
      const ratio = losses[p] === best ? 1 : losses[p] / best;
      if (ratio < Infinity) ratios[m].push(ratio);
    });
  }
  return { problems, unsolved, items: methods.map(({ id }, m) => ({ id, ratios: ratios[m].sort((a, b) => a - b) })) };
}

/** rho(tau), the share of problems within `tau` of the best. */
export function profileAt(profile: PerformanceProfile, problems: number, tau: number): number {
  let within = 0;
  while (within < profile.ratios.length && profile.ratios[within] <= tau) within++;
  return problems === 0 ? 0 : within / problems;
}
