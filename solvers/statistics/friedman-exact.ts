/**
 * Exact level of Friedman's test: with no difference between the methods every order of a block's ranks is as likely as any other
 * (Friedman 1937). The distribution of the rank sums is built block by block. Because a block's order is uniformly random, the next
 * sums depend on the sorted sums alone, so states are kept sorted: k! times fewer.
 */

/** Blocks up to which orders are counted, by the number of methods: some tenths of a second at most. Beyond, F is near enough. */
const mostBlocks = [0, 0, 50, 24, 12, 7, 3] as const;

/** Levels counted last, by their rows: a ranking is asked again at every noise between two levels. */
const counted = new Map<string, number>();
const mostCounted = 200;

/**
 * @param ranks one row a block, mean ranks for ties
 * @returns share of all orders whose sum of squared rank sums is at least the observed one; null where they are too many to count
 */
export function friedmanExactP(ranks: readonly Float64Array[]): number | null {
  if (ranks.length > (mostBlocks[ranks[0].length] ?? 0)) return null;
  const key = ranks.map((row) => row.join(' ')).join('|');
  const known = counted.get(key);
  if (known !== undefined) return known;
  if (counted.size >= mostCounted) counted.clear();
  const p = countOrders(ranks);
  counted.set(key, p);
  return p;
}

function countOrders(ranks: readonly Float64Array[]): number {
  const k = ranks[0].length;
  const n = ranks.length;
  // Doubled ranks are whole, so sums and their squares are exact.
  const rows = ranks.map((row) => Float64Array.from(row, (rank) => 2 * rank));
  const total = k * (k + 1);
  const base = 2 * k * n + 1;
  const orders = new Map<string, Float64Array>();
  let observed = 0;
  for (let j = 0; j < k; j++) {
    let sum = 0;
    for (const row of rows) sum += row[j];
    observed += sum * sum;
  }
  let states = new Map<number, number>([[encode(Float64Array.from(rows[0]).sort(), base), 1]]);
  const sums = new Float64Array(k);
  const next = new Float64Array(k);
  for (let b = 1; b < n; b++) {
    const sorted = Float64Array.from(rows[b]).sort();
    const key = sorted.join(' ');
    let list = orders.get(key);
    if (!list) orders.set(key, (list = distinctOrders(sorted)));
    const count = list.length / k;
    const grown = new Map<number, number>();
    for (const [code, share] of states) {
      decode(code, base, total * b, sums);
      for (let o = 0; o < count; o++) {
        for (let j = 0; j < k; j++) {
          // Insertion keeps the sums ascending.
          const value = sums[j] + list[o * k + j];
          let at = j;
          while (at > 0 && next[at - 1] > value) {
            next[at] = next[at - 1];
            at--;
          }
          next[at] = value;
        }
        const to = encode(next, base);
        grown.set(to, (grown.get(to) ?? 0) + share / count);
      }
    }
    states = grown;
  }
  let p = 0;
  for (const [code, share] of states) {
    decode(code, base, total * n, sums);
    let squares = 0;
    for (let j = 0; j < k; j++) squares += sums[j] * sums[j];
    if (squares >= observed) p += share;
  }
  return Math.min(1, p);
}

/** All but the last sum as digits; the last follows from the total. Below 2^53 within the limits above. */
function encode(sums: Float64Array, base: number): number {
  let code = 0;
  for (let j = 0; j + 1 < sums.length; j++) code = code * base + sums[j];
  return code;
}

function decode(code: number, base: number, total: number, out: Float64Array): void {
  let rest = total;
  for (let j = out.length - 2; j >= 0; j--) {
    const above = Math.floor(code / base);
    out[j] = code - above * base;
    code = above;
    rest -= out[j];
  }
  out[out.length - 1] = rest;
}

/** Every distinct order of sorted values, one row each, by the next larger one in dictionary order. */
function distinctOrders(sorted: Float64Array): Float64Array {
  const k = sorted.length;
  const current = Float64Array.from(sorted);
  const out: number[] = [];
  for (;;) {
    for (let j = 0; j < k; j++) out.push(current[j]);
    let i = k - 2;
    while (i >= 0 && current[i] >= current[i + 1]) i--;
    if (i < 0) return Float64Array.from(out);
    let j = k - 1;
    while (current[j] <= current[i]) j--;
    [current[i], current[j]] = [current[j], current[i]];
    current.subarray(i + 1).reverse();
  }
}
