export interface Figure { name: string, value: number, unit: string, note?: string }

/** Shortest of several runs of a function after one to warm up, in milliseconds. */
export function fastest(fn: () => unknown, runs = 5): number {
  fn()
  let least = Infinity
  for (let i = 0; i < runs; i++) {
    const start = performance.now()
    fn()
    least = Math.min(least, performance.now() - start)
  }
  return least
}
