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

/** Shortest of several runs of what is waited for, in milliseconds, without one to warm up. */
export async function quickest(runs: number, work: () => Promise<unknown>): Promise<number> {
  let least = Infinity
  for (let i = 0; i < runs; i++) {
    const start = performance.now()
    await work()
    least = Math.min(least, performance.now() - start)
  }
  return least
}
