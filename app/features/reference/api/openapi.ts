import { queryOptions } from '@tanstack/react-query';
import { z } from 'zod';
import { api } from '../../../lib/api-client';

const schemaSchema = z.record(z.string(), z.unknown());
const contentSchema = z.record(z.string(), z.object({ schema: schemaSchema.optional() }));
const operationSchema = z.object({
  operationId: z.string(), tags: z.array(z.string()), summary: z.string(), description: z.string().default(''),
  parameters: z.array(z.object({ name: z.string(), in: z.string(), required: z.boolean().default(false), description: z.string().optional(), schema: schemaSchema })).default([]),
  requestBody: z.object({ content: contentSchema }).optional(),
  responses: z.record(z.string(), z.object({ description: z.string(), content: contentSchema.optional() })),
});
export type Operation = z.infer<typeof operationSchema>;
const documentSchema = z.object({
  info: z.object({ title: z.string(), version: z.string(), description: z.string() }),
  servers: z.array(z.object({ url: z.string() })),
  tags: z.array(z.object({ name: z.string() })),
  paths: z.record(z.string(), z.record(z.string(), operationSchema)),
  components: z.object({ securitySchemes: z.record(z.string(), z.object({ description: z.string().optional() })).default({}), schemas: z.record(z.string(), schemaSchema).default({}) }),
});
export type OpenApiDocument = z.infer<typeof documentSchema>;

export const openApiQueryOptions = () =>
  queryOptions({ queryKey: ['openapi'], staleTime: Infinity, queryFn: ({ signal }) => api.get('/openapi.json', documentSchema, { signal }) });
