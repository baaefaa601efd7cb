import { describe, expect, it } from 'vitest'
import { historyOf, redo, sameValue, step, undo } from '../../../app/scenario/history'

describe('history', () => {
  it('goes back and forth, and a new step forgets what was undone', () => {
    const two = step(step(historyOf(1), 2), 3)
    expect(undo(two).present).toBe(2)
    expect(undo(undo(two)).present).toBe(1)
    expect(redo(undo(two)).present).toBe(3)
    const branched = step(undo(two), 9)
    expect(branched.present).toBe(9)
    expect(redo(branched)).toBe(branched)
    expect(undo(branched).present).toBe(2)
  })

  it('makes no step of an equal state, and stays at its ends', () => {
    const start = historyOf({ a: [1, { b: 2 }] })
    expect(step(start, { a: [1, { b: 2 }] })).toBe(start)
    expect(undo(start)).toBe(start)
    expect(redo(start)).toBe(start)
  })

  it('keeps a bounded past', () => {
    let history = historyOf(0)
    for (let i = 1; i <= 500; i++) history = step(history, i)
    expect(history.past).toHaveLength(200)
    expect(undo(history).present).toBe(499)
  })
})

describe('sameValue', () => {
  it('compares by content, whatever the order of keys', () => {
    expect(sameValue({ a: 1, b: [1, null] }, { b: [1, null], a: 1 })).toBe(true)
    expect(sameValue({ a: 1 }, { a: 1, b: undefined })).toBe(false)
    expect(sameValue([1, 2], [2, 1])).toBe(false)
    expect(sameValue([], {})).toBe(false)
    expect(sameValue(Number.NaN, Number.NaN)).toBe(true)
  })
})
