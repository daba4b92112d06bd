import type { Configuration } from '../../../shared/contracts/solvers';
import { AppError, type Issue } from '../../../shared/errors.ts';
import { contentHash } from '../../../solvers/core/hash';
import type { Method } from '../../../solvers/core/types';
import { methods } from '../../../solvers/methods/registry';
import { problemFacts } from '../../../solvers/problems/registry';
import type { PhantomDefinition } from '../../../shared/domain/phantom-definition';

/**
 * The configuration with every default filled in, so that its hash and its replay do not depend on a default that changes
 * later.
 * @throws AppError 'validation-failed' with an issue at each field at fault
 */
export function checkConfiguration(given: Configuration): Configuration {
  const method = methods.find((candidate) => candidate.key === given.method);
  if (!method) {
    throw invalid([{ path: ['configuration', 'method'], message: `No method is called '${given.method}'. There are: ${methods.map((m) => m.key).join(', ')}.` }]);
  }
  const issues: Issue[] = [];
  const parsed = method.parameters.safeParse(given.parameters);
  if (!parsed.success) {
    for (const issue of parsed.error.issues) {
      const names = issue.code === 'unrecognized_keys' ? issue.keys : [undefined];
      for (const name of names) {
        const path = issue.path.map((part) => (typeof part === 'number' ? part : String(part)));
        issues.push({
          path: ['configuration', 'parameters', ...path, ...(name === undefined ? [] : [name])],
          message: name === undefined ? issue.message : `${method.name} has no such parameter.`,
        });
      }
    }
  }
  const rule = given.rule ?? method.defaultRule;
  issues.push(...ruleIssues(method, rule));
  if (!parsed.success || issues.length > 0) throw invalid(issues);
  return { method: method.key, parameters: { ...parsed.data }, rule: method.capabilities.rules.length === 0 ? null : rule };
}

export function configurationHash(configuration: Configuration): string {
  return contentHash(configuration);
}

/** Why the method cannot work on this phantom, in words for the developer; null when it can. */
export function whyUnfit(methodKey: string, definition: Pick<PhantomDefinition, 'family' | 'dataKind' | 'geometry'>): string | null {
  const method = methods.find((candidate) => candidate.key === methodKey);
  if (!method) return `The method '${methodKey}' is not in this version of the code.`;
  const { families, dataKinds } = method.capabilities;
  if (!families.includes(definition.family)) return `${method.name} does not serve this problem family. It serves: ${families.join(', ')}.`;
  if (!dataKinds.includes(definition.dataKind)) {
    return `${method.name} needs ${dataKinds.join(' or ')} data; this phantom has ${definition.dataKind} data.`;
  }
  const reason = method.unfit?.(problemFacts(definition));
  return reason ? `${method.name} does not serve this phantom: ${reason}` : null;
}

export const methodName = (key: string): string => methods.find((method) => method.key === key)?.name ?? key;

function ruleIssues(method: Method, rule: Configuration['rule']): Issue[] {
  const accepted = method.capabilities.rules;
  if (!rule) return accepted.length === 0 ? [] : [{ path: ['configuration', 'rule'], message: `Choose a rule: ${accepted.join(', ')}.` }];
  if (accepted.length === 0) return [{ path: ['configuration', 'rule'], message: `${method.name} has no regularisation parameter: leave the rule out.` }];
  if (!accepted.includes(rule.key)) {
    return [{ path: ['configuration', 'rule', 'key'], message: `${method.name} does not accept the rule '${rule.key}'. It accepts: ${accepted.join(', ')}.` }];
  }
  if (rule.key !== 'fixed' || !method.fixedValue) return [];
  const { minimum = 0, maximum = Infinity, label, kind } = method.fixedValue;
  const path = ['configuration', 'rule', 'value'];
  if (!(rule.value >= minimum && rule.value <= maximum)) return [{ path, message: `${label} must lie between ${minimum} and ${maximum}.` }];
  if (kind === 'integer' && !Number.isInteger(rule.value)) return [{ path, message: `${label} must be a whole number.` }];
  return [];
}

function invalid(issues: readonly Issue[]): AppError {
  return new AppError('validation-failed', 'The method does not take this configuration.', issues);
}
