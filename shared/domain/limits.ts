import { z } from 'zod';

export const limits = {
  shapes: 24,
  polygonVertices: 200,
  expressionLength: 500,
  arraySide: 1024,
  frames: 10_000,
  conductivityMin: 1e-6,
  conductivityMax: 1e6,
  plainValueMax: 1e6,
} as const;

export const metres = z.number().min(-100).max(100);
