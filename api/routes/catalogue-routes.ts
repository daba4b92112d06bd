import { axisListSchema, checkListSchema, conventionListSchema, methodListSchema, metricListSchema, noiseModelListSchema, problemListSchema, ruleListSchema, statisticListSchema } from '../../shared/contracts/catalogue.ts';
import { defineRoute, type Route } from '../http/define-route.ts';
import { listAxes, listChecks, listConventions, listMethods, listMetrics, listNoiseModels, listProblems, listRules, listStatistics } from '../services/catalogue/catalogue.ts';

const tag = 'catalogue';

const readMethods = defineRoute({
  method: 'get', path: '/methods', tag, summary: 'Every method: formula, sources, parameters as fields and as JSON Schema',
  permission: 'public', response: methodListSchema, handle: () => ({ items: listMethods() }),
});
const readMetrics = defineRoute({
  method: 'get', path: '/metrics', tag, summary: 'Every metric: formula, unit, which direction is better, traps, sources',
  permission: 'public', response: metricListSchema, handle: () => ({ items: listMetrics() }),
});
const readRules = defineRoute({
  method: 'get', path: '/rules', tag, summary: 'Every parameter-choice rule, and the methods that accept it',
  permission: 'public', response: ruleListSchema, handle: () => ({ items: listRules() }),
});
const readNoiseModels = defineRoute({
  method: 'get', path: '/noise-models', tag, summary: 'Every noise model',
  permission: 'public', response: noiseModelListSchema, handle: () => ({ items: listNoiseModels() }),
});
const readChecks = defineRoute({
  method: 'get', path: '/checks', tag, summary: 'Every check: what it measures, its bound, its source',
  permission: 'public', response: checkListSchema, handle: () => ({ items: listChecks() }),
});

const readStatistics = defineRoute({
  method: 'get', path: '/statistics', tag, summary: 'Every statistic over draws, phantoms or methods: formula, traps, sources',
  permission: 'public', response: statisticListSchema, handle: () => ({ items: listStatistics() }),
});

const readProblems = defineRoute({
  method: 'get', path: '/problems', tag, summary: 'Every family of problems and every equation: model, units, how data are made and inverted',
  permission: 'public', response: problemListSchema, handle: () => ({ items: listProblems() }),
});
const readAxes = defineRoute({
  method: 'get', path: '/axes', tag, summary: 'Every axis that a run can vary: meaning, range, default levels',
  permission: 'public', response: axisListSchema, handle: () => ({ items: listAxes() }),
});
const readConventions = defineRoute({
  method: 'get', path: '/conventions', tag, summary: 'Conventions that differ between sources, as they are settled here',
  permission: 'public', response: conventionListSchema, handle: () => ({ items: listConventions() }),
});

export const catalogueRoutes: readonly Route[] = [readMethods, readMetrics, readRules, readNoiseModels, readChecks, readStatistics, readProblems, readAxes, readConventions];
