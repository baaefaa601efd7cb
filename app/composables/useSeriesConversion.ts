import { readConversion, fieldOfIssue, type ConversionFaults, type ConversionFields } from '~/series/conversionFields'
import type { ConversionChoice, StoredSeries } from '#shared/series/conversionChoice'
import type { Recipe } from '#shared/series/recipe'
import { InputError } from '#shared/types/issue'

/**
 * The recipe that the fields ask for, made anew whenever one of them changes. The parser of units is loaded when it is first needed.
 * `waiting` is true from a change of a field until its recipe or its faults stand.
 */
export function useSeriesConversion(fields: Ref<ConversionFields | null>, areaM2: Ref<number>, withdrawalPositive: Ref<boolean>, storedOf: (versionIds: string[]) => Promise<StoredSeries[]>) {
  const recipe = shallowRef<Recipe | null>(null)
  const choice = shallowRef<ConversionChoice | null>(null)
  const faults = shallowRef<ConversionFaults>({})
  const waiting = ref(false)
  let ticket = 0

  async function make() {
    const mine = ++ticket
    const read = fields.value && readConversion(fields.value, readFigure)
    let made: Recipe | null = null
    let found: ConversionFaults = read?.faults ?? {}
    if (read?.choice) {
      waiting.value = true
      try {
        const { recipeOfChoice } = await import('#shared/series/conversionChoice')
        const stored = await storedOf(read.choice.subtract?.map(({ versionId }) => versionId) ?? [])
        made = recipeOfChoice(read.choice, areaM2.value, withdrawalPositive.value, stored)
      }
      catch (error) {
        found = error instanceof InputError
          ? Object.fromEntries(error.issues.map(({ path, message }) => [fieldOfIssue(path), message]))
          : error instanceof ApiProblem ? { 'subtract/0': error.message } : { unit: 'The unit could not be read just now; the page has to be loaded again.' }
      }
    }
    if (mine !== ticket) return
    recipe.value = made
    choice.value = made ? read!.choice : null
    faults.value = found
    waiting.value = false
  }

  if (import.meta.client) watch([fields, areaM2, withdrawalPositive], () => void make(), { deep: true, immediate: true })
  /** A conversion was asked for and is not complete: nothing can be stored. */
  const incomplete = computed(() => fields.value !== null && recipe.value === null)
  return { recipe, choice, faults, waiting, incomplete }
}
