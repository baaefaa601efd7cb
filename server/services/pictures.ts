import type { PictureTask } from '../workers/picture'
import { Problem } from '../utils/problem'
import { runtimeFile } from '../utils/runtimeFiles'
import type { Context } from './context'
import { runMap } from './report/mapPicture'
import { runInputOf, runResultOf, type RunRow } from './runs'

const kept = new WeakMap<Context, Map<string, Promise<Uint8Array>>>()
/** Some 200 KB each. */
const most = 20

/** Whether the renderer, a native addon, exists for this machine. Imported here so that the build lays it beside the server. */
const hasRenderer = (): Promise<boolean> => import('@resvg/resvg-js').then(() => true, () => false)

/** A run's map as PNG, for messages and slides. A run never changes, so neither does its picture; the last ones are kept in memory. */
export async function runPicture(context: Context, run: RunRow): Promise<Uint8Array> {
  if (!await hasRenderer()) throw new Problem(501, 'not-available', 'There is no renderer of pictures for this server’s machine, so no map.png. The same map is there as map.svg.')
  const pictures = kept.get(context) ?? new Map<string, Promise<Uint8Array>>()
  kept.set(context, pictures)
  let picture = pictures.get(run.id)
  if (!picture) {
    if (pictures.size >= most) pictures.clear()
    const map = runMap({ result: runResultOf(run), sources: runInputOf(run).regions })
    const fonts = ['NotoSans_400Regular.ttf', 'NotoSans_600SemiBold.ttf'].map(file => runtimeFile('fonts', file))
    picture = context.jobs.compute<Uint8Array>('picture', { map, fonts } satisfies PictureTask)
    picture.catch(() => pictures.delete(run.id))
    pictures.set(run.id, picture)
  }
  return picture
}
