import type { EarthModel } from '#shared/earth/earthModel'
import type { Store } from '../database/client'
import type { Jobs } from './jobs'
import type { Mail } from './mail'
import type { Throttle } from './people'

/** What every service needs, handed in as its first argument: services hold no state of their own. */
export interface Context extends Store {
  earth: EarthModel
  /** The instant as ISO text. */
  now: () => string
  demo: boolean
  jobs: Jobs
  throttle: Throttle
  /** Null where the instance sends no mail. */
  mail: Mail | null
  /** scrypt; handed in so that services do not depend on the web framework. */
  passwords: { hash: (password: string) => Promise<string>, verify: (hash: string, password: string) => Promise<boolean> }
}
