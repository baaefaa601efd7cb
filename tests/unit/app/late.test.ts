// @vitest-environment happy-dom
import { mount } from '@vue/test-utils'
import { defineComponent, h } from 'vue'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { late } from '../../../app/utils/late'

const panel = defineComponent({ props: { name: { type: String, required: true } }, setup: props => () => h('h2', `Panel of ${props.name}`) })
/** The panel inside something that stands. */
const page = (loader: () => Promise<{ default: typeof panel }>) => {
  const Late = late(loader)
  return mount({ render: () => h('main', [h(Late, { name: 'Bruma' })]) })
}
const settled = () => vi.advanceTimersByTimeAsync(1)

describe('a part of a page that comes late', () => {
  beforeEach(() => { vi.useFakeTimers() })
  afterEach(() => { vi.useRealTimers() })

  it('stands there with its props once it is here, and says so only if that takes a moment', async () => {
    let arrive = (_: { default: typeof panel }): void => {}
    const column = page(() => new Promise((done) => { arrive = done }))
    expect(column.text()).toBe('')
    await vi.advanceTimersByTimeAsync(250)
    expect(column.get('[role=status]').text()).toBe('One moment…')
    arrive({ default: panel })
    await settled()
    expect(column.text()).toBe('Panel of Bruma')
  })

  it('that does not arrive says what failed, and is asked for again by a press', async () => {
    const loader = vi.fn().mockRejectedValueOnce(new Error('no connection')).mockResolvedValue({ default: panel })
    const column = page(loader)
    await vi.advanceTimersByTimeAsync(250)
    expect(column.get('[role=alert]').text()).toContain('could not be fetched')
    await column.get('button').trigger('click')
    await settled()
    expect(column.text()).toBe('Panel of Bruma')
    expect(loader).toHaveBeenCalledTimes(2)
  })
})
