import type { AnswerOf } from '#shared/api/contract'
import type { contracts } from '#shared/api/contracts'
import { listed } from '#shared/text/words'
import { editionFilePath } from '~/result/files'

/** Title, description and picture of a public page, plain words for search engines and messages. */
export function useEditionMeta(edition: Ref<AnswerOf<typeof contracts.editionRead> | null>, origin: string) {
  const title = () => edition.value ? `${edition.value.title}${edition.value.withdrawn ? ' (withdrawn)' : ''}` : 'Publication'
  const description = () => edition.value ? `${edition.value.invented ? 'Invented data. ' : ''}${edition.value.sentence}` : ''
  /** The map of the regions, drawn on the server; messengers show PNG and no SVG. */
  const picture = () => edition.value ? `${origin}${editionFilePath(edition.value.slug, edition.value.n, 'map.png')}` : undefined
  const alt = () => edition.value ? `Map of the regions: ${listed(edition.value.result.regions.map(region => region.name))}`.slice(0, 400) : undefined
  useHead({ title })
  useSeoMeta({
    description, ogTitle: title, ogDescription: description, ogType: 'article', ogSiteName: 'Counterpoise', twitterCard: 'summary_large_image',
    ogImage: picture, ogImageType: 'image/png', ogImageWidth: 1200, ogImageHeight: 630, ogImageAlt: alt, twitterImage: picture, twitterImageAlt: alt,
    // A withdrawn edition stays readable; it is not to be found by accident.
    robots: () => edition.value?.withdrawn ? 'noindex' : undefined,
  })
}
