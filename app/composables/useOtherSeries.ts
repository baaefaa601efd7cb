import type { AnswerOf } from '#shared/api/contract'
import type { contracts } from '#shared/api/contracts'
import type { OtherSeries } from '#shared/series/agreement'
import { earlierVersions, onSameGround } from '#shared/series/others'

type Region = AnswerOf<typeof contracts.regionRead>

/**
 * What a new series of a region is held against: its earlier versions, and the newest series of regions on the same ground. What
 * cannot be fetched is left out; the other checks are made all the same.
 */
export function useOtherSeries(region: () => Region | null | undefined) {
  const api = useApi()
  const others = shallowRef<OtherSeries[]>([])

  async function valuesOf(name: string, versionId: string): Promise<OtherSeries> {
    const { mjd, massGt } = await api('seriesVersionRead', { params: { id: versionId } })
    return { name, mjd, massGt }
  }
  async function newestOf(id: string): Promise<OtherSeries | null> {
    const { name, series } = await api('regionRead', { params: { id } })
    return series ? valuesOf(name, series.latest.id) : null
  }
  onMounted(async () => {
    const own = region()
    if (!own) return
    const asked = [
      ...earlierVersions(own.versions).map(version => valuesOf(`version ${version.n}`, version.id)),
      ...own.overlaps.filter(overlap => onSameGround(overlap.share, overlap.shareOfOther)).map(overlap => newestOf(overlap.id)),
    ]
    const found = await Promise.allSettled(asked)
    others.value = found.flatMap(answer => answer.status === 'fulfilled' && answer.value ? [answer.value] : [])
  })
  return others
}
