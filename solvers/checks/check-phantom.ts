import type { CheckResult } from '../core/types';
import type { PhantomCheckContext } from './phantom-check';
import type { Check } from './check';
import { phantomChecks } from './registry';

/**
 * All checks of a simulated phantom, in the order of the registry. A check that cannot finish counts as failed and says why.
 * Cost: about that of two simulations.
 */
export function checkPhantom(context: PhantomCheckContext): CheckResult[] {
  // The checks of a family read definitions of that family.
  const checks = phantomChecks[context.definition.family] as readonly Check<PhantomCheckContext>[];
  return checks.map((check) => {
    try {
      return check.evaluate(context);
    } catch (error) {
      const meaning = `The check could not finish: ${error instanceof Error ? error.message : String(error)}`;
      return { key: check.key, name: check.name, state: 'fail', figure: null, bound: check.bound, comparison: check.comparison, unit: check.unit, meaning, source: check.source.short };
    }
  });
}
