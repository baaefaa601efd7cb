/**
 * Milliseconds of processor time that this process spends in a function: a limit on it says how much work there is,
 * whatever else the machine does meanwhile. Speed proper is measured by `npm run bench`.
 */
export function cpuMilliseconds(work: () => void): number {
  const before = process.cpuUsage()
  work()
  const { user, system } = process.cpuUsage(before)
  return (user + system) / 1000
}
