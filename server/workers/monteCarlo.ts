import type { MessagePort } from 'node:worker_threads'
import { monteCarloPaced, type MonteCarloInput, type MonteCarloResult } from '#shared/earth/time/monteCarlo'
import { monteCarloRecipeSteps, type RecipeMonteCarlo } from '#shared/series/monteCarloRecipe'
import type { Recipe, SeriesTable } from '#shared/series/recipe'
import { withPauses } from '#shared/series/steps'
import { answerOf, type WorkerAnswer } from './parts/answer'
import { paceOf } from './parts/pace'

/** Members of the trends of a run's regions, or of one series through its conversion. */
export type MonteCarloTask = { port?: MessagePort } & (
  | { ask: 'trends', input: MonteCarloInput }
  | { ask: 'recipe', recipe: Recipe, table: SeriesTable, members: number, seed: number }
)

/** A seeded Monte Carlo, away from the thread that answers requests. Gets and returns plain data; knows no database. */
export default function monteCarlo(task: MonteCarloTask): Promise<WorkerAnswer<MonteCarloResult | RecipeMonteCarlo>> {
  return answerOf(() => work(task))
}

async function work(task: MonteCarloTask): Promise<MonteCarloResult | RecipeMonteCarlo> {
  const pace = paceOf(task.port)
  try {
    if (task.ask === 'trends') return await monteCarloPaced(task.input, pace)
    return await withPauses(monteCarloRecipeSteps(task.recipe, task.table, { members: task.members, seed: task.seed }), pace)
  }
  finally {
    pace.done()
  }
}
