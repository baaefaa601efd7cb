import { compare } from '#shared/validation/check'
import { allChecks } from '#shared/validation/index'
import type { Context } from './context'

type View = ReturnType<typeof computed>
const views = new WeakMap<Context, View>()

/** The engine beside its references; computed once for as long as the server runs, since neither changes. */
export function validationView(context: Context): View {
  const view = views.get(context) ?? computed(context)
  views.set(context, view)
  return view
}

function computed(context: Context) {
  const checks = allChecks(context.earth).map(check => ({ ...check, ...compare(check), tolerance: { ...check.tolerance } }))
  return {
    engineVersion: context.earth.engineVersion, earthModelChecksum: context.earth.checksum,
    passed: checks.filter(c => c.within).length, failed: checks.filter(c => !c.within).length, checks,
  }
}
