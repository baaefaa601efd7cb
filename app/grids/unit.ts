import { InputError } from '#shared/types/issue'

/** What a typed unit of height is read as; the parser comes when the first one is typed. */
export async function readUnit(text: string): Promise<{ text: string, ok: boolean }> {
  const { understandUnit } = await import('#shared/series/quantities')
  try {
    return { text: understandUnit(text, 'water-height').reading, ok: true }
  }
  catch (error) {
    if (error instanceof InputError) return { text: error.message, ok: false }
    throw error
  }
}
