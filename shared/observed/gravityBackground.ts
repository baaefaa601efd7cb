import type { BackgroundRow, RunInput, RunWarning } from '../types/run.ts'

/** Whether a background rate is a torque and moves no mass, by its key or its name. */
const isTorque = ({ key, name }: BackgroundRow): boolean => /tidal[\s-]+(braking|friction|dissipation)/i.test(`${key} ${name}`)

/**
 * A run's input as gravity sees it: tidal braking slows the Earth by a torque and moves no mass, so that its row has no part in an account
 * of gravity coefficients. Other rows stay. Also what is to be said of it.
 */
export function asGravitySees(input: RunInput): { input: RunInput, warnings: RunWarning[] } {
  const torques = input.background.filter(isTorque)
  if (torques.length === 0) return { input, warnings: [] }
  return {
    input: { ...input, background: input.background.filter(row => !isTorque(row)) },
    warnings: [{ code: 'torque-left-out', message: `${torques.map(row => row.name).join(', ')}: a torque that moves no mass and leaves no mark in gravity; the row is left out here.`, regions: [] }]
  }
}
