import type { AxisDescription, CheckDescription, ConventionWire, MethodWire, MetricWire, NoiseModelWire, ParameterFieldWire, ProblemDefinitionWire, RuleWire, SourceWire, StatisticWire } from '../../../../shared/contracts/catalogue';
import { formatNumber } from '../../../lib/format';

export const kinds = ['metrics', 'methods', 'rules', 'noise', 'checks', 'statistics', 'problems', 'axes', 'conventions'] as const;
export type Kind = (typeof kinds)[number];
export const kindNames: Record<Kind, { many: string; line: string }> = {
  metrics: { many: 'Metrics', line: 'figures of one reconstruction' },
  methods: { many: 'Methods', line: 'algorithms that a configuration can use' },
  rules: { many: 'Parameter-choice rules', line: 'how the regularisation parameter is found' },
  noise: { many: 'Noise models', line: 'how a draw is made from clean data' },
  checks: { many: 'Checks', line: 'validations of a problem, a phantom or a run' },
  statistics: { many: 'Statistics', line: 'how draws are summed up and methods compared' },
  problems: { many: 'Problems', line: 'families and equations: what is simulated and what is inverted' },
  axes: { many: 'Axes', line: 'what a run can vary from level to level' },
  conventions: { many: 'Conventions', line: 'where sources differ, settled here' },
};

export interface Catalogue {
  metrics: MetricWire[];
  methods: MethodWire[];
  rules: RuleWire[];
  noise: NoiseModelWire[];
  checks: CheckDescription[];
  statistics: StatisticWire[];
  problems: ProblemDefinitionWire[];
  axes: AxisDescription[];
  conventions: ConventionWire[];
}

/** One entry of any registry in the shape that the definition page shows. */
export interface Definition {
  kind: Kind;
  key: string;
  name: string;
  summary: string;
  formula: string | null;
  facts: (readonly [string, string])[];
  fields: readonly ParameterFieldWire[];
  notes: { title: string; items: readonly string[] };
  sources: readonly SourceWire[];
}

const better = { lower: 'lower', higher: 'higher', one: 'near 1', zero: 'near 0' } as const;
const comparisons = { 'at-most': 'at most', 'at-least': 'at least', equal: 'equal to' } as const;
const subjects = { phantom: 'a simulated phantom', problem: 'the model that inverts', method: 'a prepared method', run: 'a finished run' } as const;
const level = (print: AxisDescription['print'], value: number): string => (print === 'share' ? `${formatNumber(100 * value, 2)} %` : formatNumber(value, 2));
const none = { title: '', items: [] };
const capabilityWords = (method: MethodWire): string => (['linear', 'nonlinear', 'direct', 'statistical'] as const).filter((word) => method.capabilities[word]).join(', ');

export function definitionsOf(kind: Kind, catalogue: Catalogue): Definition[] {
  switch (kind) {
    case 'metrics':
      return catalogue.metrics.map((m) => ({
        kind, key: m.key, name: m.name, summary: m.summary, formula: m.formula, fields: [], sources: m.sources, notes: { title: 'Traps', items: m.traps },
        facts: [['Unit', m.unit || 'none'], ['Better', better[m.better]], ['Evaluated on', 'grid pixels inside the body'], ['Short name', m.short], ['Key', m.key]],
      }));
    case 'methods':
      return catalogue.methods.map((m) => ({
        kind, key: m.key, name: m.name, summary: m.summary, formula: m.formula, fields: m.fixedValue ? [...m.fields, m.fixedValue] : m.fields, sources: m.sources, notes: none,
        facts: [['Class', m.class], ['Capabilities', capabilityWords(m)], ['Families', m.capabilities.families.join(', ')], ['Data', m.capabilities.dataKinds.join(', ')], ['Rules', m.capabilities.rules.join(', ') || 'none: no regularisation parameter'], ['Key', m.key]],
      }));
    case 'rules':
      return catalogue.rules.map((r) => ({
        kind, key: r.key, name: r.name, summary: r.summary, formula: r.formula, fields: r.fields, sources: r.sources, notes: { title: 'Conventions', items: r.conventions },
        facts: [['Noise level', r.usesNoiseLevel ? 'told to the rule' : 'not used'], ['Accepted by', r.methods.join(', ')], ['Key', r.key]],
      }));
    case 'noise':
      return catalogue.noise.map((n) => ({
        kind, key: n.key, name: n.name, summary: n.summary, formula: n.formula, fields: [], sources: n.sources, notes: none,
        facts: [['Level', n.exact ? 'exact in every draw' : 'in expectation'], ['Families', n.families.join(', ')], ['Key', n.key]],
      }));
    case 'checks':
      return catalogue.checks.map((c) => ({
        kind, key: c.key, name: c.name, summary: c.summary, formula: c.formula, fields: [], sources: c.sources, notes: none,
        facts: [['Applies to', subjects[c.appliesTo]], ['Bound', `${comparisons[c.comparison]} ${formatNumber(c.bound, 2)}`], ['Unit', c.unit || 'none'], ['Key', c.key]],
      }));
    case 'statistics':
      return catalogue.statistics.map((s) => ({
        kind, key: s.key, name: s.name, summary: s.summary, formula: s.formula, fields: [], sources: s.sources, notes: { title: 'Traps', items: s.traps },
        facts: [['Over', s.over], ['Key', s.key]],
      }));
    case 'problems':
      return catalogue.problems.map((p) => ({
        kind, key: p.key, name: p.name, summary: p.summary, formula: p.formula, fields: [], sources: p.sources, notes: { title: 'Conventions', items: p.conventions },
        facts: [...p.facts, ['Family', p.family], ['Key', p.key]],
      }));
    case 'axes':
      return catalogue.axes.map((a) => ({
        kind, key: a.key, name: a.name, summary: a.line, formula: null, fields: [], sources: [], notes: none,
        facts: [['Range', `${level(a.print, a.minimum)} to ${level(a.print, a.maximum)}`], ['Levels offered', a.defaultLevels.map((value) => level(a.print, value)).join(', ')], ['Families', a.families.join(', ')], ['Key', a.key]],
      }));
    case 'conventions':
      return catalogue.conventions.map((c) => ({ kind, key: c.key, name: c.name, summary: c.text, formula: null, fields: [], sources: [], notes: none, facts: [['Key', c.key]] }));
  }
}

export const asKind = (text: string | undefined): Kind | null => kinds.find((kind) => kind === text) ?? null;
