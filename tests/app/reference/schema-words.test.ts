import { describe, expect, it } from 'vitest';
import { schemaWords } from '../../../app/features/reference/model/schema-words';

describe('a schema in words', () => {
  it('reads a tuple whose end is a bare false, which once stopped the reference of the API', () => {
    expect(schemaWords({ type: 'array', prefixItems: [{ type: 'number' }, { type: 'integer', minimum: 1, maximum: 9 }], items: false })).toBe('2 values: number, integer, 1 to 9');
    expect(schemaWords({ type: 'array', items: false })).toBe('list of nothing');
    expect(schemaWords(true)).toBe('any');
  });
  it('names references, choices, ranges and lists', () => {
    expect(schemaWords({ $ref: '#/components/schemas/Group' })).toBe('Group');
    expect(schemaWords({ enum: ['a', 'b'] })).toBe('one of a, b');
    expect(schemaWords({ type: 'array', items: { type: 'number' } })).toBe('list of number');
    expect(schemaWords({ anyOf: [{ type: 'string', maxLength: 20 }, { type: 'null' }] })).toBe('string, at most 20 characters or null');
  });
});
