const ratio = 0.6180339887498949;

/** Smallest value of f on [low, high] by golden section (Kiefer 1953) down to `width`; f unimodal there. */
export function goldenSection(f: (x: number) => number, low: number, high: number, width: number): number {
  let a = low;
  let b = high;
  let x1 = b - ratio * (b - a);
  let x2 = a + ratio * (b - a);
  let f1 = f(x1);
  let f2 = f(x2);
  while (b - a > width) {
    if (f1 <= f2) {
      b = x2;
      x2 = x1;
      f2 = f1;
      x1 = b - ratio * (b - a);
      f1 = f(x1);
    } else {
      a = x1;
      x1 = x2;
      f1 = f2;
      x2 = a + ratio * (b - a);
      f2 = f(x2);
    }
  }
  return 0.5 * (a + b);
}
