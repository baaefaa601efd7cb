import type { Contract } from './contract.ts'
import { engineContracts } from './contracts/engine.ts'
import { gridContracts } from './contracts/grids.ts'
import { instanceContracts } from './contracts/instance.ts'
import { observedContracts } from './contracts/observed.ts'
import { peopleContracts } from './contracts/people.ts'
import { publicationContracts } from './contracts/publication.ts'
import { regionContracts } from './contracts/regions.ts'
import { runContracts } from './contracts/runs.ts'
import { seriesContracts } from './contracts/series.ts'

/** Every route of the product, in one list. */
export const contracts = {
  ...peopleContracts,
  ...engineContracts,
  ...regionContracts,
  ...seriesContracts,
  ...gridContracts,
  ...observedContracts,
  ...runContracts,
  ...publicationContracts,
  ...instanceContracts,
}
export type ContractId = keyof typeof contracts
export const contractList: Contract[] = Object.values(contracts) as unknown as Contract[]
