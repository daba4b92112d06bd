import { queryOptions } from '@tanstack/react-query';
import { axisListSchema, checkListSchema, conventionListSchema, methodListSchema, metricListSchema, noiseModelListSchema, problemListSchema, ruleListSchema, statisticListSchema } from '../../../../shared/contracts/catalogue';
import { api } from '../../../lib/api-client';

/** The registries of this instance; they do not change while the server runs. */
export const catalogueQueryOptions = () =>
  queryOptions({
    queryKey: ['catalogue'],
    staleTime: Infinity,
    queryFn: async ({ signal }) => {
      const [metrics, methods, rules, noise, checks, statistics, problems, axes, conventions] = await Promise.all([
        api.get('/metrics', metricListSchema, { signal }), api.get('/methods', methodListSchema, { signal }), api.get('/rules', ruleListSchema, { signal }),
        api.get('/noise-models', noiseModelListSchema, { signal }), api.get('/checks', checkListSchema, { signal }), api.get('/statistics', statisticListSchema, { signal }),
        api.get('/problems', problemListSchema, { signal }), api.get('/axes', axisListSchema, { signal }), api.get('/conventions', conventionListSchema, { signal }),
      ]);
      return { metrics: metrics.items, methods: methods.items, rules: rules.items, noise: noise.items, checks: checks.items, statistics: statistics.items, problems: problems.items, axes: axes.items, conventions: conventions.items };
    },
  });
