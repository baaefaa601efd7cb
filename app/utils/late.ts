import { defineAsyncComponent, h, shallowRef, type Component } from 'vue'

/**
 * A part of a page that is fetched when it is first shown. In its place stands a quiet word once that takes a moment, and where it does not
 * arrive, what failed and a way to try again. What comes with a page from the server stays as it is until its script is here.
 */
export function late<C extends Component>(loader: () => Promise<{ default: C }>): C {
  const again = shallowRef<(() => void) | null>(null)
  const tryAgain = (): void => {
    again.value?.()
    again.value = null
  }
  const note = () => again.value
    ? h('p', { class: 'border-l-4 border-loss px-3 text-sm', role: 'alert' }, [
        'This part of the page could not be fetched from the server. What you entered is still here. ',
        h('button', { type: 'button', class: 'act', onClick: tryAgain }, 'Try again'),
      ])
    : h('p', { class: 'text-sm text-soft', role: 'status' }, 'One moment…')
  return defineAsyncComponent({
    loader: async () => (await loader()).default as Component,
    suspensible: false,
    delay: 200,
    loadingComponent: note,
    onError: (_, retry, fail) => {
      if (typeof window === 'undefined') fail()
      else again.value = retry
    },
  }) as C
}
