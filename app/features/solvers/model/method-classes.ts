import type { Method, MethodClass } from '../../../../solvers/core/types';

export const methodClassNames: Record<MethodClass, { name: string; line: string }> = {
  baseline: { name: 'Baseline', line: 'the background alone' },
  spectral: { name: 'Spectral truncation', line: 'singular values, filters' },
  variational: { name: 'Variational', line: 'penalty plus data fit' },
  iterative: { name: 'Early stopping', line: 'iterate until the noise' },
  nonlinear: { name: 'Nonlinear', line: 'the whole model, step by step' },
  direct: { name: 'Direct formula', line: 'no iteration, no penalty' },
  statistical: { name: 'Statistical', line: 'ensembles and samples' },
};

/** Classes that hold a method, in the order above. */
export function classesOf(methods: readonly Method[]): MethodClass[] {
  return (Object.keys(methodClassNames) as MethodClass[]).filter((key) => methods.some((m) => m.class === key));
}

export function capabilityWords(method: Method): string {
  const { linear, nonlinear, direct, statistical } = method.capabilities;
  return [linear && 'linear', nonlinear && 'nonlinear', direct && 'direct', statistical && 'statistical', !direct && !statistical && 'iterative'].filter(Boolean).join(', ');
}
