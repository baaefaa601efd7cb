import { and, desc, eq, isNull } from 'drizzle-orm'
import type { contracts } from '#shared/api/contracts'
import type { BodyOf } from '#shared/api/contract'
import type { Chain } from '#shared/observed/chainTypes'
import { defaultChain, readChain } from '#shared/observed/readChain'
import { can, type Principal } from '#shared/permissions'
import { InputError } from '#shared/types/issue'
import { schema } from '../database/client'
import { Problem } from '../utils/problem'
import { authorise, change, nameOfUser, newId } from './change'
import type { Context } from './context'
import { canonicalJson } from './hash'

type ChainRow = typeof schema.chain.$inferSelect

function chainRow(context: Context, id: string, { inBin = false } = {}): ChainRow {
  const row = context.db.select().from(schema.chain).where(eq(schema.chain.id, id)).get()
  if (!row || (row.deletedAt && !inBin)) throw new Problem(404, 'not-found', 'There is no such chain.')
  return row
}

function viewOf(context: Context, principal: Principal | null, row: ChainRow) {
  return {
    id: row.id, revision: row.revision, name: row.name, chain: JSON.parse(row.chain) as Chain, createdAt: row.createdAt,
    createdBy: nameOfUser(context, row.createdBy), canWrite: can(principal, 'observed.write', { workspaceId: row.workspaceId }),
  }
}

const rowsOf = (context: Context, workspaceId: string) => context.db.select().from(schema.chain)
  .where(and(eq(schema.chain.workspaceId, workspaceId), isNull(schema.chain.deletedAt))).orderBy(desc(schema.chain.id)).all()

export function listChains(context: Context, principal: Principal | null, workspaceId: string) {
  authorise(principal, 'observed.read', { workspaceId })
  return { items: rowsOf(context, workspaceId).map(row => viewOf(context, principal, row)), nextCursor: null }
}

/** A name stands for one chain: two of the same name could not be told apart in a report. */
function refuseTwice(context: Context, workspaceId: string, name: string, self?: string) {
  if (rowsOf(context, workspaceId).some(row => row.name === name && row.id !== self)) {
    throw new InputError(`There is a chain “${name}” already.`, [{ path: 'name', code: 'taken', message: 'is the name of another chain of this workspace' }])
  }
}

export function createChain(context: Context, principal: Principal | null, workspaceId: string, body: BodyOf<typeof contracts.chainCreate>) {
  const actor = authorise(principal, 'observed.write', { workspaceId })
  const chain = readChain(body.chain)
  const id = newId()
  change(context, principal, { action: 'observed.write', verb: 'chain kept', entity: 'reduction chain', id, workspaceId }, (tx) => {
    refuseTwice(context, workspaceId, body.name)
    tx.insert(schema.chain).values({ id, workspaceId, name: body.name, chain: canonicalJson(chain), createdAt: context.now(), createdBy: actor.userId }).run()
    return { result: undefined, after: { name: body.name, chain } }
  })
  return viewOf(context, principal, chainRow(context, id))
}

export function changeChain(context: Context, principal: Principal | null, id: string, { revision, name, chain }: BodyOf<typeof contracts.chainChange>) {
  const row = chainRow(context, id)
  authorise(principal, 'observed.write', { workspaceId: row.workspaceId })
  const next = { name: name ?? row.name, chain: chain ? canonicalJson(readChain(chain)) : row.chain, revision: row.revision + 1 }
  change(context, principal, { action: 'observed.write', verb: 'chain changed', entity: 'reduction chain', id, workspaceId: row.workspaceId, row, revision }, (tx) => {
    refuseTwice(context, row.workspaceId, next.name, id)
    tx.update(schema.chain).set(next).where(eq(schema.chain.id, id)).run()
    return { result: undefined, before: { name: row.name, chain: JSON.parse(row.chain) as unknown }, after: { name: next.name, chain: JSON.parse(next.chain) as unknown } }
  })
  return viewOf(context, principal, chainRow(context, id))
}

export function binChain(context: Context, principal: Principal | null, id: string, revision: number, restore = false) {
  const row = chainRow(context, id, { inBin: restore })
  const next = row.revision + 1
  return change(context, principal, { action: 'observed.write', verb: restore ? 'taken out of the bin' : 'put in the bin', entity: 'reduction chain', id, workspaceId: row.workspaceId, row, revision }, (tx) => {
    if (restore) refuseTwice(context, row.workspaceId, row.name, id)
    tx.update(schema.chain).set({ deletedAt: restore ? null : context.now(), revision: next }).where(eq(schema.chain.id, id)).run()
    return { result: { revision: next }, before: { name: row.name }, after: { inBin: !restore } }
  })
}

/** A chain with the name that it is kept under in a workspace; null where it is kept under none. */
export interface NamedChain { name: string | null, chain: Chain }

/**
 * The chain that an address or a request asks for: “usual” or nothing, the id of one that is kept, or JSON. JSON that says the same as
 * one that is kept has its name.
 */
export function namedChain(context: Context, workspaceId: string, text: string | undefined): NamedChain {
  if (text && /^[0-9A-HJKMNP-TV-Z]{26}$/.test(text)) {
    const row = chainRow(context, text)
    if (row.workspaceId !== workspaceId) throw new Problem(404, 'not-found', 'There is no such chain.')
    return { name: row.name, chain: JSON.parse(row.chain) as Chain }
  }
  const chain = chainOfText(text)
  const same = canonicalJson(chain)
  return { name: rowsOf(context, workspaceId).find(row => row.chain === same)?.name ?? null, chain }
}

/** A chain as JSON, checked; the usual one where there is none. */
export function chainOfText(text: string | undefined): Chain {
  if (!text || text === 'usual') return defaultChain()
  let json: unknown
  try {
    json = JSON.parse(text)
  }
  catch (error) {
    throw new InputError('The chain is no JSON.', [{ path: 'chain', code: 'json', message: error instanceof Error ? error.message : 'cannot be read' }])
  }
  return readChain(json)
}
