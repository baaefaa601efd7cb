import type { Action } from '#shared/permissions'

/** What somebody must be allowed in the workspace in view for a page to mean anything to them; said in the page's meta. */
export type PageNeed = Extract<Action, 'region.read' | 'region.write' | 'observed.read' | 'scenario.read' | 'edition.list' | 'member.manage' | 'log.read'>

declare module '#app' {
  interface PageMeta { needs?: PageNeed }
}

/** Whose roles open such a page. */
export const needTexts: Readonly<Record<PageNeed, string>> = {
  'region.read': 'Leads, hydrologists, glaciologists and readers see the regions.',
  'region.write': 'Hydrologists bring series of liquid water, glaciologists those of ice, leads both.',
  'observed.read': 'Leads, hydrologists, glaciologists and readers see the observed series.',
  'scenario.read': 'Leads, hydrologists, glaciologists and readers see the scenarios.',
  'edition.list': 'Everybody with a role sees the publications.',
  'member.manage': 'Administrators ask people in and give roles.',
  'log.read': 'Administrators and leads read the change log.',
}

interface NavLink { to: string, label: string, needs: PageNeed, /** Pages below it that have another address. */ also?: string }

/** The pages in the head of every page. */
export const navLinks: readonly NavLink[] = [
  { to: '/map', label: 'Map', needs: 'region.read' },
  { to: '/regions', label: 'Regions', needs: 'region.read', also: '/grids' },
  { to: '/observations', label: 'Observations', needs: 'observed.read' },
  { to: '/scenarios', label: 'Scenarios', needs: 'scenario.read', also: '/runs' },
  { to: '/publications', label: 'Publications', needs: 'edition.list' },
  { to: '/people', label: 'People', needs: 'member.manage' },
  { to: '/log', label: 'Change log', needs: 'log.read' },
]

const within = (path: string, base: string | undefined) => base !== undefined && (path === base || path.startsWith(`${base}/`))

/** Whether a page belongs under a link: a region's series stands under Regions, a run under Scenarios. */
export function belongsUnder(link: NavLink, path: string): boolean {
  return within(path, link.to) || within(path, link.also)
}
