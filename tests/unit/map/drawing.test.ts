import { geoDistance } from 'd3-geo'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { addVertex, beginRing, dropLast, emptyDraft, finishRing, insertVertex, moveAll, moveVertex, removeVertex, type Draft } from '../../../app/map/drawing/draft'
import { draftOutline, edgeMiddles, faultOf } from '../../../app/map/drawing/draftShape'
import { historyOf, redo, step, undo } from '../../../app/map/drawing/history'
import { draftOf } from '../../../app/map/drawing/recover'
import { alongArc, drawnOutline } from '../../../shared/geo/greatCircle'
import { spreadOf } from '../../../shared/geo/spread'
import type { Outline, Position } from '../../../shared/types/domain'

const draw = (...vertices: Position[]): Draft => finishRing(vertices.reduce<Draft>((draft, place) => addVertex(draft, place), beginRing(emptyDraft)))
const area = (outline: Outline): number => spreadOf(outline).areaM2

describe('a draft', () => {
  it('grows by vertices, drops the last and closes with three', () => {
    let draft = beginRing(emptyDraft)
    draft = addVertex(addVertex(draft, [0, 0]), [0, 0])
    expect(draft.rings).toEqual([[[0, 0]]])
    draft = dropLast(addVertex(draft, [10, 0]))
    expect(draft.rings).toEqual([[[0, 0]]])
    expect(finishRing(draft)).toEqual({ ...emptyDraft })
    expect(draw([0, 0], [10, 0], [5, 8])).toEqual({ rings: [[[0, 0], [10, 0], [5, 8]]], edges: 'great-circle', open: false })
  })

  it('moves, inserts and removes vertices, and goes when fewer than three are left', () => {
    const draft = draw([0, 0], [10, 0], [5, 8])
    expect(moveVertex(draft, { ring: 0, vertex: 1 }, [12.1234567, 1]).rings[0]![1]).toEqual([12.12346, 1])
    const four = insertVertex(draft, { ring: 0, vertex: 2 }, [1, 5])
    expect(four.rings[0]).toEqual([[0, 0], [10, 0], [5, 8], [1, 5]])
    expect(removeVertex(four, { ring: 0, vertex: 0 }).rings[0]).toEqual([[10, 0], [5, 8], [1, 5]])
    expect(removeVertex(draft, { ring: 0, vertex: 0 }).rings).toEqual([])
  })

  it('moves as a whole: distances stay, the place it was taken by comes to lie under the hand', () => {
    const draft = draw([0, 0], [10, 0], [5, 8])
    const moved = moveAll(draft, [5, 3], [175, 70]).rings[0]!
    const gap = (a: Position, b: Position) => geoDistance(a, b) * 180 / Math.PI
    draft.rings[0]!.forEach((place, k) => expect(gap(moved[k]!, moved[(k + 1) % 3]!)).toBeCloseTo(gap(place, draft.rings[0]![(k + 1) % 3]!), 4))
    draft.rings[0]!.forEach((place, k) => expect(gap(moved[k]!, [175, 70])).toBeCloseTo(gap(place, [5, 3]), 4))
    expect(moveAll(draft, [5, 3], [5, 3])).toBe(draft)
  })

  it('makes a hole of a ring inside another, and a part of one outside', () => {
    const shell = draw([0, 0], [20, 0], [20, 20], [0, 20])
    const inside = [[5, 5], [10, 5], [10, 10]] as Position[]
    const holed = finishRing(inside.reduce<Draft>((draft, place) => addVertex(draft, place), beginRing(shell)))
    expect(draftOutline(holed)).toMatchObject({ type: 'Polygon', coordinates: [expect.anything(), expect.anything()] })
    expect(area(draftOutline(holed)!)).toBeCloseTo(area(draftOutline(shell)!) - area(drawnOutline(inside)), -3)
    const apart = finishRing(([[30, 0], [35, 0], [35, 5]] as Position[]).reduce<Draft>((draft, place) => addVertex(draft, place), beginRing(shell)))
    expect(draftOutline(apart)!.type).toBe('MultiPolygon')
    expect(faultOf(apart, draftOutline(apart))).toBeNull()
  })

  it('names the two edges that cross', () => {
    const bow = draw([0, 0], [20, 10], [20, 0], [0, 10])
    const fault = faultOf(bow, draftOutline(bow))!
    expect(fault.message).toBe('Two edges cross.')
    expect(fault.lines.map(line => [line[0], line.at(-1)])).toEqual([[[0, 0], [20, 10]], [[20, 0], [0, 10]]])
  })

  it('shows the ring that encloses nothing, among others and alone, and one that goes twice round a pole', () => {
    const flat = draw([0, 0], [10, 0], [20, 0])
    const whole = faultOf(flat, draftOutline(flat))!
    expect(whole.message).toBe('The outline encloses no area.')
    expect(whole.lines.map(line => [line[0], Math.max(...line.map(([lon]) => lon)), line.every(([, lat]) => lat === 0)])).toEqual([[[0, 0], 20, true]])
    const shell = draw([0, 0], [20, 0], [20, 20], [0, 20])
    const beside = finishRing(([[40, 0], [40, 10], [40, 5]] as Position[]).reduce<Draft>((draft, place) => addVertex(draft, place), beginRing(shell)))
    const fault = faultOf(beside, draftOutline(beside))!
    expect(fault.message).toBe('One ring encloses no area.')
    expect(fault.lines).toHaveLength(1)
    expect(fault.lines[0]!.every(([lon]) => Math.abs(lon - 40) < 1e-9)).toBe(true)
    const twice = draw([0, 80], [120, 80], [-120, 80], [0, 75], [120, 75], [-120, 75])
    expect(faultOf(twice, draftOutline(twice))).toMatchObject({ message: expect.stringMatching(/round the pole 2 times/), lines: [expect.arrayContaining([[0, 80]])] })
  })

  it('has a middle on every edge, on the great circle', () => {
    const middles = edgeMiddles(draw([0, 40], [60, 40], [30, 60]))
    expect(middles).toHaveLength(3)
    expect(middles[0]!.place[1]).toBeCloseTo(alongArc([0, 40], [60, 40], 0.5)[1], 12)
    expect(edgeMiddles({ ...draw([0, 40], [60, 40], [30, 60]), open: true })).toHaveLength(2)
  })

  it('over the pole and across the antimeridian is an ordinary region', () => {
    const pole = draw([0, 75], [120, 72], [-120, 78])
    expect(faultOf(pole, draftOutline(pole))).toBeNull()
    expect(area(draftOutline(pole)!)).toBeCloseTo(area(drawnOutline(pole.rings[0]!)), -2)
    const fiji = draw([175, -20], [-175, -20], [-178, -12])
    expect(draftOutline(fiji)!.type).toBe('MultiPolygon')
  })
})

describe('draftOf', () => {
  const sorted = (ring: readonly Position[]): string[] => ring.map(([x, y]) => `${x.toFixed(4)} ${y.toFixed(4)}`).sort()

  it('gives a drawn outline its vertices back', () => {
    const cases: Position[][] = [
      [[-50, 62], [-22, 70], [-30, 83], [-58, 78]],
      [[175, -20], [-175, -20], [-178, -12]],
      [[0, 75], [120, 72], [-120, 78]],
      [[10, -62], [100, -70], [-150, -66], [-60, -75]],
      [[150, 10], [-150, 5], [-160, -20], [-175, -8], [160, -25]]
    ]
    for (const vertices of cases) {
      const stored = draftOutline(draw(...vertices))!
      const draft = draftOf(stored)
      expect(draft.edges).toBe('great-circle')
      expect(draft.rings.map(sorted)).toEqual([sorted(vertices)])
    }
  })

  it('gives a drawn outline with a hole back', () => {
    const shell = draw([160, 40], [-160, 40], [-165, 60], [165, 60])
    const hole: Position[] = [[178, 48], [-178, 48], [-179, 52]]
    const both = finishRing(hole.reduce<Draft>((draft, place) => addVertex(draft, place), beginRing(shell)))
    const draft = draftOf(draftOutline(both)!)
    expect(draft.rings.map(sorted).sort()).toEqual(both.rings.map(sorted).sort())
  })

  it('keeps every vertex and straight edges of an outline from a file', () => {
    const file: Outline = { type: 'Polygon', coordinates: [[[0, 0], [40, 0], [40, 50], [0, 50], [0, 0]], [[10, 10], [20, 10], [20, 20], [10, 10]]] }
    const draft = draftOf(file)
    expect(draft).toEqual({ rings: [[[0, 0], [40, 0], [40, 50], [0, 50]], [[10, 10], [20, 10], [20, 20]]], edges: 'straight', open: false })
    expect(area(draftOutline(draft)!) / area(file)).toBeCloseTo(1, 12)
  })

  it('joins a file that was cut at the antimeridian', () => {
    const file: Outline = { type: 'MultiPolygon', coordinates: [
      [[[170, -10], [180, -10], [180, 10], [170, 10], [170, -10]]], [[[-180, -10], [-170, -10], [-170, 10], [-180, 10], [-180, -10]]]
    ] }
    const draft = draftOf(file)
    expect(draft.rings).toHaveLength(1)
    expect(draft.rings[0]).toHaveLength(4)
    expect(area(draftOutline(draft)!) / area(file)).toBeCloseTo(1, 12)
  })

  it('keeps the region whatever it is given', () => {
    fc.assert(fc.property(
      fc.array(fc.double({ min: 4, max: 30, noNaN: true }), { minLength: 3, maxLength: 12 }),
      fc.integer({ min: -180, max: 180 }), fc.integer({ min: -55, max: 55 }), fc.boolean(),
      (radii, lon, lat, drawn) => {
        const ring = radii.map((r, k): Position =>
          [lon + r * Math.cos(2 * Math.PI * k / radii.length), lat + r * Math.sin(2 * Math.PI * k / radii.length)])
        const outline: Outline = drawn ? drawnOutline(ring) : { type: 'Polygon', coordinates: [[...ring, ring[0]!]] }
        expect(area(draftOutline(draftOf(outline))!) / area(outline)).toBeCloseTo(1, 6)
      }
    ), { numRuns: 100, seed: 9 })
  })
})

describe('history', () => {
  it('goes back and forth without limit, and forgets what was taken back once a new step is made', () => {
    let history = historyOf(0)
    for (let k = 1; k <= 500; k++) history = step(history, k)
    for (let k = 0; k < 500; k++) history = undo(history)
    expect(history.present).toBe(0)
    expect(undo(history)).toBe(history)
    history = redo(redo(history))
    expect(history.present).toBe(2)
    history = step(history, 9)
    expect(redo(history)).toBe(history)
    expect(undo(history).present).toBe(2)
  })
})
