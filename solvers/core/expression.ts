import { parse, type MathNode } from 'mathjs/number';
import * as m from './math';

/**
 * Expressions typed by a reader, in a safe subset: numbers, given variables, arithmetic, comparisons and a list of
 * functions. mathjs parses; what it parsed is checked against an allow-list and compiled to our own evaluator, so that values
 * have the same bits on every engine and nothing of mathjs's run-time can be reached. The work of one evaluation is bounded
 * by the number of nodes.
 */

export type CompiledExpression = (variables: Float64Array) => number;

const maxLength = 500;
const maxNodes = 200;
const maxDepth = 32;

interface FunctionRule {
  readonly least: number;
  readonly most: number;
  readonly apply: (a: number, b: number, rest: readonly number[]) => number;
}

const one = (apply: (a: number) => number): FunctionRule => ({ least: 1, most: 1, apply });
const two = (apply: (a: number, b: number) => number): FunctionRule => ({ least: 2, most: 2, apply });
const bool = (condition: boolean): number => (condition ? 1 : 0);
const modulo = (a: number, b: number): number => a - b * Math.floor(a / b);
const step = (a: number): number => (a >= 0 ? 1 : a < 0 ? 0 : NaN);

/** Functions by name. Trigonometric arguments in rad; `log` is natural; `step(t)` is 1 from t = 0 on. */
const functions: ReadonlyMap<string, FunctionRule> = new Map<string, FunctionRule>([
  ['abs', one(Math.abs)],
  ['sqrt', one(Math.sqrt)],
  ['cbrt', one(m.cbrt)],
  ['exp', one(m.exp)],
  ['log', one(m.ln)],
  ['log10', one(m.log10)],
  ['sin', one(m.sin)],
  ['cos', one(m.cos)],
  ['tan', one(m.tan)],
  ['asin', one(m.asin)],
  ['acos', one(m.acos)],
  ['atan', one(m.atan)],
  ['atan2', two(m.atan2)],
  ['sinh', one(m.sinh)],
  ['cosh', one(m.cosh)],
  ['tanh', one(m.tanh)],
  ['floor', one(Math.floor)],
  ['ceil', one(Math.ceil)],
  ['round', one((a) => Math.floor(a + 0.5))],
  ['sign', one(Math.sign)],
  ['step', one(step)],
  ['heaviside', one(step)],
  ['pow', two(power)],
  ['mod', two(modulo)],
  ['hypot', two((a, b) => Math.sqrt(a * a + b * b))],
  ['min', { least: 1, most: 8, apply: (a, b, rest) => rest.reduce((s, t) => Math.min(s, t)) }],
  ['max', { least: 1, most: 8, apply: (a, b, rest) => rest.reduce((s, t) => Math.max(s, t)) }],
]);
const constants: ReadonlyMap<string, number> = new Map([['pi', Math.PI], ['e', Math.E], ['true', 1], ['false', 0]]);
const words: ReadonlySet<string> = new Set(['and', 'or', 'not', 'xor', 'mod']);

/** Names of the functions that an expression may call, for help texts. */
export const expressionFunctions: readonly string[] = [...functions.keys()];

const binary: ReadonlyMap<string, (a: number, b: number) => number> = new Map<string, (a: number, b: number) => number>([
  ['add', (a, b) => a + b],
  ['subtract', (a, b) => a - b],
  ['multiply', (a, b) => a * b],
  ['divide', (a, b) => a / b],
  ['pow', power],
  ['mod', modulo],
  ['smaller', (a, b) => bool(a < b)],
  ['larger', (a, b) => bool(a > b)],
  ['smallerEq', (a, b) => bool(a <= b)],
  ['largerEq', (a, b) => bool(a >= b)],
  ['equal', (a, b) => bool(a === b)],
  ['unequal', (a, b) => bool(a !== b)],
  ['and', (a, b) => bool(a !== 0 && b !== 0)],
  ['or', (a, b) => bool(a !== 0 || b !== 0)],
  ['xor', (a, b) => bool((a !== 0) !== (b !== 0))],
]);
const unary: ReadonlyMap<string, (a: number) => number> = new Map<string, (a: number) => number>([
  ['unaryMinus', (a) => -a],
  ['unaryPlus', (a) => a],
  ['not', (a) => bool(a === 0)],
]);

/** Small whole powers by multiplication, which is exact in its order on every engine and much faster. */
function power(a: number, b: number): number {
  if (b === 2) return a * a;
  if (b === 3) return a * a * a;
  if (b === 1) return a;
  if (b === 0.5) return Math.sqrt(a);
  return m.pow(a, b);
}

/**
 * @param variables names whose values the evaluator reads from its argument, in this order
 * @throws RangeError that says what is not allowed, at which character (counted from 1), and what is
 */
export function compileExpression(text: string, variables: readonly string[]): CompiledExpression {
  checkCharacters(text, variables);
  let root: MathNode;
  try {
    root = parse(text);
  } catch (cause) {
    throw new RangeError(parseMessage(cause), { cause });
  }
  const state = { nodes: 0 };
  return compileNode(root, variables, state, 1);
}

function parseMessage(cause: unknown): string {
  const text = cause instanceof Error ? cause.message : '';
  if (cause instanceof SyntaxError) {
    const at = /\(char (\d+)\)/.exec(text);
    const detail = text.replace(/\s*\(char \d+\)/, '');
    return `The expression cannot be read${at ? ` at character ${at[1]}` : ''}: ${detail}.`;
  }
  return 'The expression is nested too deeply: use fewer brackets.';
}

/** Everything that has a position: length, characters, names, depth of brackets. */
function checkCharacters(text: string, variables: readonly string[]): void {
  if (text.trim() === '') throw new RangeError('The expression is empty.');
  if (text.length > maxLength) throw new RangeError(`The expression has ${text.length} characters; at most ${maxLength} are allowed.`);
  let depth = 0;
  let at = 0;
  while (at < text.length) {
    const rest = text.slice(at);
    const number = /^(\d+\.?\d*|\.\d+)([eE][+-]?\d+)?/.exec(rest);
    if (number) {
      if (!Number.isFinite(Number(number[0]))) throw new RangeError(`The number at character ${at + 1} is too large.`);
      at += number[0].length;
      continue;
    }
    const name = /^[A-Za-z][A-Za-z0-9_]*/.exec(rest);
    if (name) {
      const word = name[0];
      if (!variables.includes(word) && !constants.has(word) && !functions.has(word) && !words.has(word))
        throw new RangeError(
          `'${word}' at character ${at + 1} is not known. Variables: ${variables.join(', ')}; constants: pi, e; functions: ${expressionFunctions.join(', ')}.`,
        );
      at += word.length;
      continue;
    }
    const operator = /^(<=|>=|==|!=|[-+*/^(),<>?: \t])/.exec(rest);
    if (!operator)
      throw new RangeError(`'${String.fromCodePoint(rest.codePointAt(0) ?? 32)}' at character ${at + 1} is not allowed: use numbers, names, + - * / ^ ( ) , comparisons, and a ? b : c.`);
    if (operator[0] === '(' && ++depth > maxDepth) throw new RangeError(`The brackets at character ${at + 1} are nested more than ${maxDepth} deep.`);
    if (operator[0] === ')') depth--;
    at += operator[0].length;
  }
}

function compileNode(node: MathNode, variables: readonly string[], state: { nodes: number }, depth: number): CompiledExpression {
  if (++state.nodes > maxNodes) throw new RangeError(`The expression has more than ${maxNodes} parts.`);
  if (depth > 2 * maxDepth) throw new RangeError('The expression is nested too deeply: use fewer brackets.');
  const child = (inner: MathNode): CompiledExpression => compileNode(inner, variables, state, depth + 1);
  if (is.parenthesis(node)) return child(node.content);
  if (is.constant(node)) {
    const value = typeof node.value === 'boolean' ? bool(node.value) : node.value;
    if (typeof value !== 'number' || !Number.isFinite(value)) throw new RangeError(`'${node.toString()}' is not a finite number.`);
    return () => value;
  }
  if (is.symbol(node)) {
    const index = variables.indexOf(node.name);
    if (index >= 0) return (values) => values[index];
    const value = constants.get(node.name);
    if (value !== undefined) return () => value;
    throw new RangeError(`'${node.name}' is a function: write ${node.name}( ... ).`);
  }
  if (is.operator(node)) {
    const [first, second] = node.args;
    if (node.args.length === 1) {
      const apply = unary.get(node.fn);
      if (apply) {
        const a = child(first);
        return (values) => apply(a(values));
      }
    } else if (node.args.length === 2) {
      const apply = binary.get(node.fn);
      if (apply) {
        const a = child(first);
        const b = child(second);
        // The three commonest without a second call.
        if (node.fn === 'add') return (values) => a(values) + b(values);
        if (node.fn === 'subtract') return (values) => a(values) - b(values);
        if (node.fn === 'multiply') return (values) => a(values) * b(values);
        return (values) => apply(a(values), b(values));
      }
    }
    throw new RangeError(`The operator '${node.op}' is not allowed.`);
  }
  if (is.relational(node)) {
    const parts = node.params.map(child);
    const relations = node.conditionals.map((name) => {
      const apply = binary.get(name);
      if (!apply) throw new RangeError(`The comparison '${name}' is not allowed.`);
      return apply;
    });
    return (values) => {
      let left = parts[0](values);
      for (let k = 0; k < relations.length; k++) {
        const right = parts[k + 1](values);
        if (relations[k](left, right) === 0) return 0;
        left = right;
      }
      return 1;
    };
  }
  if (is.conditional(node)) {
    const condition = child(node.condition);
    const yes = child(node.trueExpr);
    const no = child(node.falseExpr);
    return (values) => (condition(values) !== 0 ? yes(values) : no(values));
  }
  if (is.call(node)) {
    const name = node.fn.type === 'SymbolNode' ? node.fn.name : '';
    const rule = functions.get(name);
    if (!rule) throw new RangeError(variables.includes(name) || constants.has(name) ? `'${name}' is not a function: write ${name} * ( ... ).` : 'Only the listed functions may be called.');
    const args = node.args;
    if (args.length < rule.least || args.length > rule.most)
      throw new RangeError(`${name} takes ${rule.least === rule.most ? rule.least : `${rule.least} to ${rule.most}`} argument${rule.most === 1 ? '' : 's'}, not ${args.length}.`);
    const parts = args.map(child);
    const { apply } = rule;
    if (rule.most === 1) {
      const a = parts[0];
      return (values) => apply(a(values), 0, noValues);
    }
    if (rule.most === 2) {
      const [a, b] = parts;
      return (values) => apply(a(values), b(values), noValues);
    }
    return (values) => apply(0, 0, parts.map((part) => part(values)));
  }
  throw new RangeError('Only one formula is allowed: no lists, ranges, units, texts, assignments or definitions.');
}

const noValues: readonly number[] = [];

type Node<T extends string, P> = MathNode & { readonly type: T } & P;
/** Narrowing by the node's own type tag; mathjs's typings give its nodes as one open interface. */
const is = {
  parenthesis: (n: MathNode): n is Node<'ParenthesisNode', { content: MathNode }> => n.type === 'ParenthesisNode',
  constant: (n: MathNode): n is Node<'ConstantNode', { value: unknown }> => n.type === 'ConstantNode',
  symbol: (n: MathNode): n is Node<'SymbolNode', { name: string }> => n.type === 'SymbolNode',
  operator: (n: MathNode): n is Node<'OperatorNode', { op: string; fn: string; args: MathNode[] }> => n.type === 'OperatorNode',
  relational: (n: MathNode): n is Node<'RelationalNode', { params: MathNode[]; conditionals: string[] }> => n.type === 'RelationalNode',
  conditional: (n: MathNode): n is Node<'ConditionalNode', { condition: MathNode; trueExpr: MathNode; falseExpr: MathNode }> => n.type === 'ConditionalNode',
  call: (n: MathNode): n is Node<'FunctionNode', { fn: { type: string; name: string }; args: MathNode[] }> => n.type === 'FunctionNode',
};
