import type { Contract } from './contract.ts'

/** The text of a module with what a call needs of each contract: pages carry it in place of the schemas, which only the server holds bodies and answers to. */
export function callsModule(contracts: Readonly<Record<string, Contract>>): string {
  const calls = Object.fromEntries(Object.entries(contracts).map(([id, { method, path, bodyType }]) => [id, { method, path, bodyType }]))
  return [
    'import type { ContractId } from \'#shared/api/contracts\'',
    'import type { Contract } from \'#shared/api/contract\'',
    `export const calls: Readonly<Record<ContractId, Pick<Contract, 'method' | 'path' | 'bodyType'>>> = ${JSON.stringify(calls, null, 2)}`,
    '',
  ].join('\n')
}
