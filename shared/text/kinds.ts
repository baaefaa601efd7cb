import type { RegionKind, Role } from '../types/domain.ts'

/** Kinds of region as people read them. */
export const kindTexts: Readonly<Record<RegionKind, string>> = {
  'aquifer': 'aquifer',
  'basin': 'basin',
  'lake': 'lake',
  'reservoir': 'reservoir',
  'soil-water': 'soil water',
  'snow-water': 'snow water',
  'ice-sector': 'ice sector',
  'glacier-region': 'glacier region',
}

/** What each role does, in one sentence each. */
export const roleTexts: Readonly<Record<Role, string>> = {
  administrator: 'Asks people in, gives and takes roles, reads the change log.',
  lead: 'Changes every region, series and scenario, runs, publishes and withdraws.',
  hydrologist: 'Changes regions of liquid water and their series; makes and runs scenarios of their own.',
  glaciologist: 'Changes regions of ice and their series; makes and runs scenarios of their own.',
  reader: 'Reads everything in the workspace and exports reports; changes nothing.',
}
