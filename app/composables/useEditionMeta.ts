import type { AnswerOf } from '#shared/api/contract'
import type { contracts } from '#shared/api/contracts'

/** Title and description of a public page, plain words for search engines and messages. */
export function useEditionMeta(edition: Ref<AnswerOf<typeof contracts.editionRead> | null>) {
  const title = () => edition.value ? `${edition.value.title}${edition.value.withdrawn ? ' (withdrawn)' : ''}` : 'Publication'
  const description = () => edition.value ? `${edition.value.invented ? 'Invented data. ' : ''}${edition.value.sentence}` : ''
  useHead({ title })
  useSeoMeta({
    description, ogTitle: title, ogDescription: description, ogType: 'article', ogSiteName: 'Counterpoise', twitterCard: 'summary',
    // A withdrawn edition stays readable; it is not to be found by accident.
    robots: () => edition.value?.withdrawn ? 'noindex' : undefined,
  })
}
