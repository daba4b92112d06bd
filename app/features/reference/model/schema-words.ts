type Json = Record<string, unknown>;

/**
 * A JSON Schema in a few words, for a table: 'integer, 1 to 200', 'one of a, b', 'list of number'. A schema may be a bare
 * true (anything) or false (nothing more), as after the items of a tuple.
 */
export function schemaWords(schema: Json | boolean, depth = 0): string {
  if (typeof schema === 'boolean') return schema ? 'any' : 'nothing';
  if (typeof schema.$ref === 'string') return schema.$ref.split('/').pop() ?? 'object';
  if (Array.isArray(schema.enum)) return `one of ${schema.enum.join(', ')}`;
  if ('const' in schema) return `always ${String(schema.const)}`;
  const options = (schema.anyOf ?? schema.oneOf) as Json[] | undefined;
  if (options) return depth > 1 ? 'one of several' : [...new Set(options.map((option) => schemaWords(option, depth + 1)))].join(' or ');
  if (Array.isArray(schema.prefixItems)) return `${schema.prefixItems.length} values: ${(schema.prefixItems as Json[]).map((item) => schemaWords(item, depth + 1)).join(', ')}`;
  if (schema.type === 'array') return `list of ${schemaWords((schema.items ?? true) as Json | boolean, depth + 1)}`;
  if (schema.type === 'object') return 'object';
  const range = [schema.minimum ?? schema.exclusiveMinimum, schema.maximum ?? schema.exclusiveMaximum];
  // A safe-integer bound says nothing to a reader.
  const [low, high] = range.map((v) => (typeof v === 'number' && Math.abs(v) < Number.MAX_SAFE_INTEGER ? v : undefined));
  const bounds = low !== undefined && high !== undefined ? `, ${low} to ${high}` : low !== undefined ? `, at least ${low}` : high !== undefined ? `, at most ${high}` : '';
  const length = typeof schema.maxLength === 'number' ? `, at most ${schema.maxLength} characters` : '';
  return `${String(schema.type ?? 'any')}${typeof schema.format === 'string' ? ` (${schema.format})` : ''}${bounds}${length}`;
}

export interface SchemaField {
  name: string;
  words: string;
  required: boolean;
  description: string;
}

/** The fields of an object schema, one level deep; a reference is followed. */
export function schemaFields(schema: Json | undefined, components: Record<string, Json>): SchemaField[] {
  if (!schema) return [];
  if (typeof schema.$ref === 'string') return schemaFields(components[schema.$ref.split('/').pop() ?? ''], components);
  if (Array.isArray(schema.allOf)) return (schema.allOf as Json[]).flatMap((part) => schemaFields(part, components));
  const required = (schema.required ?? []) as string[];
  return Object.entries((schema.properties ?? {}) as Record<string, Json>).map(([name, field]) => ({
    name, words: schemaWords(field), required: required.includes(name), description: typeof field.description === 'string' ? field.description : '',
  }));
}
