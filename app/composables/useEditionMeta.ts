import type { AnswerOf } from '#shared/api/contract'
import type { contracts } from '#shared/api/contracts'
import { editionFilePath } from '~/result/files'

/** Title, description and picture of a public page, plain words for search engines and messages. */
export function useEditionMeta(edition: Ref<AnswerOf<typeof contracts.editionRead> | null>, origin: string) {
  const title = () => edition.value ? `${edition.value.title}${edition.value.withdrawn ? ' (withdrawn)' : ''}` : 'Publication'
  const description = () => edition.value ? `${edition.value.invented ? 'Invented data. ' : ''}${edition.value.sentence}` : ''
  /** The map of the regions, drawn on the server. */
  const picture = () => edition.value ? `${origin}${editionFilePath(edition.value.slug, edition.value.n, 'map.svg')}` : undefined
  useHead({ title })
  useSeoMeta({
    description, ogTitle: title, ogDescription: description, ogType: 'article', ogSiteName: 'Counterpoise', ogImage: picture, twitterCard: 'summary_large_image',
    // A withdrawn edition stays readable; it is not to be found by accident.
    robots: () => edition.value?.withdrawn ? 'noindex' : undefined,
  })
}
