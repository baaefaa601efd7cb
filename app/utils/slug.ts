/** A link that can be read aloud, from a title: lower-case letters, digits and single hyphens, 3 to 80 characters. */
export function suggestSlug(title: string): string {
  const plain = title
    .normalize('NFKD').replace(/[\u0300-\u036F]/g, '').toLowerCase()
    .replace(/ß/g, 'ss').replace(/[øö]/g, 'o').replace(/æ/g, 'ae').replace(/[’'′]/g, '')
    .replace(/[^a-z0-9]+/g, '-')
  const cut = plain.slice(0, 80).replace(/^-+|-+$/g, '')
  return cut.length >= 3 ? cut : `edition-${cut}`.replace(/-+$/, '')
}

/** Why a link cannot be used; null where it can. */
export function slugFault(slug: string): string | null {
  if (slug.length < 3 || slug.length > 80) return 'A link has 3 to 80 characters.'
  return /^[a-z0-9]+(-[a-z0-9]+)*$/.test(slug) ? null : 'A link has lower-case letters, digits and single hyphens between them.'
}
