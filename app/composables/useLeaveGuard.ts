import { onBeforeRouteLeave, type RouteLocationNormalized } from 'vue-router'

/**
 * Holds people back who leave a page with changes that are not saved. Inside the product a question is asked (`asked` opens it);
 * when the whole page goes, the browser asks.
 */
export function useLeaveGuard(dirty: Ref<boolean>) {
  const goal = shallowRef<RouteLocationNormalized | null>(null)
  let free = false

  onBeforeRouteLeave((to) => {
    if (free || !dirty.value) return true
    goal.value = to
    return false
  })
  const hold = (event: BeforeUnloadEvent) => {
    if (dirty.value && !free) event.preventDefault()
  }
  onMounted(() => window.addEventListener('beforeunload', hold))
  onBeforeUnmount(() => window.removeEventListener('beforeunload', hold))

  return {
    asked: computed(() => goal.value !== null),
    stay: () => { goal.value = null },
    /** Goes where one wanted to go, without the changes. */
    leave: async () => {
      const to = goal.value
      goal.value = null
      free = true
      if (to) await navigateTo(to.fullPath)
    },
    /** Lets the next leaving pass, as after putting the row in the bin. */
    release: () => { free = true },
  }
}
