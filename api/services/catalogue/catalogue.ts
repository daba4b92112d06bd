import { z } from 'zod';
import { axisKeys, axisWords } from '../../../shared/domain/axes';
import type { AxisDescription, CheckDescription, ConventionWire, MethodWire, MetricWire, NoiseModelWire, ParameterFieldWire, ProblemDefinitionWire, RuleWire, SourceWire, StatisticWire } from '../../../shared/contracts/catalogue';
import { methodChecks, phantomChecks, problemChecks, runChecks } from '../../../solvers/checks/registry';
import type { Check } from '../../../solvers/checks/check';
import { conventions } from '../../../solvers/core/conventions';
import type { Method, Metric, ParameterField, Source } from '../../../solvers/core/types';
import { methods } from '../../../solvers/methods/registry';
import { metrics } from '../../../solvers/metrics/registry';
import { noiseModels } from '../../../solvers/noise/registry';
import { parameterRules } from '../../../solvers/parameter-choice/registry';
import { problemDefinitions } from '../../../solvers/problems/definitions';
import { statistics } from '../../../solvers/statistics/definitions';

/** The registries in the shape of the wire. They do not change while the server runs. */
export const listMethods = (): MethodWire[] => methods.map(toMethod);
export const listMetrics = (): MetricWire[] => metrics.map(toMetric);
export const listNoiseModels = (): NoiseModelWire[] =>
  noiseModels.map(({ key, name, summary, formula, sources, exact, families }) => ({ key, name, summary, formula, sources: sources.map(toSource), exact, families: [...families] }));
export const listRules = (): RuleWire[] =>
  parameterRules.map((rule) => ({
    key: rule.key,
    name: rule.name,
    summary: rule.summary,
    formula: rule.formula,
    sources: rule.sources.map(toSource),
    usesNoiseLevel: rule.usesNoiseLevel,
    fields: rule.fields.map(toField),
    conventions: [...rule.conventions],
    methods: methods.filter((method) => method.capabilities.rules.includes(rule.key)).map((method) => method.key),
  }));

export const listStatistics = (): StatisticWire[] => statistics.map((own) => ({ ...own, traps: [...own.traps], sources: own.sources.map(toSource) }));

export const listChecks = (): CheckDescription[] => [
  ...new Map(Object.values(phantomChecks).flat().map((check) => [check.key, toCheck(check, 'phantom')])).values(),
  ...problemChecks.map((check) => toCheck(check, 'problem')),
  ...methodChecks.map((check) => toCheck(check, 'method')),
  ...runChecks.map((check) => toCheck(check, 'run')),
];

export const listProblems = (): ProblemDefinitionWire[] =>
  problemDefinitions().map((own) => ({ ...own, facts: own.facts.map(([label, text]): [string, string] => [label, text]), conventions: [...own.conventions], sources: own.sources.map(toSource) }));
export const listAxes = (): AxisDescription[] => axisKeys.map((key) => ({ key, ...axisWords[key], defaultLevels: [...axisWords[key].defaultLevels], families: [...axisWords[key].families] }));
export const listConventions = (): ConventionWire[] => conventions.map((own) => ({ ...own }));

const toCheck = ({ key, name, unit, bound, comparison, formula, summary, source }: Check<never>, appliesTo: CheckDescription['appliesTo']): CheckDescription => ({
  key, name, appliesTo, unit, bound, comparison, formula, summary, sources: [toSource(source)],
});

export const toSource = ({ short, full, fromMemory }: Source): SourceWire => ({ short, full, fromMemory: fromMemory ?? false });

export function toField(field: ParameterField): ParameterFieldWire {
  return {
    name: field.name,
    label: field.label,
    symbol: field.symbol ?? null,
    unit: field.unit,
    help: field.help,
    kind: field.kind,
    default: field.default,
    minimum: field.minimum ?? null,
    maximum: field.maximum ?? null,
    scale: field.scale ?? 'linear',
    choices: (field.choices ?? []).map(({ value, label }) => ({ value, label })),
  };
}

function toMethod(method: Method): MethodWire {
  const { linear, nonlinear, direct, statistical, families, dataKinds, rules } = method.capabilities;
  return {
    key: method.key,
    name: method.name,
    class: method.class,
    summary: method.summary,
    formula: method.formula,
    sources: method.sources.map(toSource),
    fields: method.fields.map(toField),
    parameterSchema: z.toJSONSchema(method.parameters, { io: 'input' }),
    capabilities: { linear, nonlinear, direct, statistical, families: [...families], dataKinds: [...dataKinds], rules: [...rules] },
    defaultRule: method.defaultRule ? { ...method.defaultRule } : null,
    fixedValue: method.fixedValue ? toField(method.fixedValue) : null,
  };
}

function toMetric(metric: Metric): MetricWire {
  const { key, name, short, unit, better, formula, summary, sources, traps } = metric;
  return { key, name, short, unit, better, formula, summary, sources: sources.map(toSource), traps: [...traps] };
}
