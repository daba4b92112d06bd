import { checkListSchema, methodListSchema, metricListSchema, noiseModelListSchema, ruleListSchema, statisticListSchema } from '../../shared/contracts/catalogue.ts';
import { defineRoute, type Route } from '../http/define-route.ts';
import { listChecks, listMethods, listMetrics, listNoiseModels, listRules, listStatistics } from '../services/catalogue/catalogue.ts';

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

export const catalogueRoutes: readonly Route[] = [readMethods, readMetrics, readRules, readNoiseModels, readChecks, readStatistics];
