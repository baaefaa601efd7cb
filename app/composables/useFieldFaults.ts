import type { InjectionKey } from 'vue'

interface FieldFaults { report: (id: string, text: string | null) => void, faults: Ref<ReadonlyMap<string, string>> }
const key: InjectionKey<FieldFaults> = Symbol('field faults')

/** Called by a form: what its fields cannot read, so that nothing is saved past a fault. */
export function provideFieldFaults(): FieldFaults {
  const faults = shallowRef<ReadonlyMap<string, string>>(new Map())
  const shared: FieldFaults = {
    faults,
    report(id, text) {
      if ((faults.value.get(id) ?? null) === text) return
      const next = new Map(faults.value)
      if (text === null) next.delete(id)
      else next.set(id, text)
      faults.value = next
    },
  }
  provide(key, shared)
  return shared
}

/** Called by a field, to say what it cannot read. */
export function useFieldFaults(): FieldFaults {
  return inject(key, () => ({ report: () => undefined, faults: shallowRef(new Map()) }), true)
}
