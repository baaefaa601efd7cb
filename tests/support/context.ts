import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join, resolve } from 'node:path'
import { loadEarthModel } from '#shared/earth/earthModel'
import type { Principal } from '#shared/permissions'
import type { Role } from '#shared/types/domain'
import { openStore, schema } from '../../server/database/client'
import { newId } from '../../server/services/change'
import type { Context } from '../../server/services/context'
import { addMembership, createThrottle, createWorkspace } from '../../server/services/people'

/** A context on a temporary SQLite file of its own, without workers: for services that are tested without the web. */
export function temporaryContext(): Context & { dispose: () => void } {
  const dataDir = mkdtempSync(join(tmpdir(), 'counterpoise-'))
  const store = openStore(dataDir, resolve('drizzle'))
  let second = 0
  return {
    ...store,
    earth: loadEarthModel(),
    now: () => new Date(Date.UTC(2026, 0, 1, 0, 0, second++)).toISOString(),
    demo: false,
    get jobs(): never { throw new Error('this context has no workers') },
    throttle: createThrottle(),
    mail: null,
    passwords: { hash: async password => `plain:${password}`, verify: async (hash, password) => hash === `plain:${password}` },
    dispose: () => {
      store.close()
      rmSync(dataDir, { recursive: true, force: true })
    },
  }
}

/** A workspace with one person for each role that is asked for. */
export function populate(context: Context, roles: Role[], name = 'Test workspace') {
  return context.db.transaction((tx) => {
    const place = createWorkspace(context, tx, { name, agencyName: `${name} agency`, invented: true })
    const people = {} as Record<Role, Principal>
    for (const role of roles) {
      const userId = newId()
      const email = `${role}@${place.workspaceId.toLowerCase()}.example`
      tx.insert(schema.user).values({ id: userId, email, name: `A ${role}`, passwordHash: 'plain:secret-word', createdAt: context.now() }).run()
      addMembership(context, tx, { ...place, userId, role })
      people[role] = { userId, name: `A ${role}`, email, operator: false, memberships: [{ ...place, role }] }
    }
    return { ...place, people }
  })
}
