import { describe, expect, it } from 'vitest'
import { mostPlaces, placesText, questionOf, withPlaces } from '../../../app/seaLevel/question'
import { seaLevelView, type SeaLevelAnswer } from '../../../app/seaLevel/view'

describe('the question in the address', () => {
  it('opens with feedback, millimetres and no place', () => {
    expect(questionOf({})).toEqual({ feedback: true, as: 'mm', places: [], faults: [] })
    expect(questionOf({ feedback: 'off', as: 'mean' })).toMatchObject({ feedback: false, as: 'mean' })
    expect(questionOf({ feedback: 'maybe', as: '1' })).toMatchObject({ feedback: true, as: 'mm' })
  })

  it('carries places there and back, and says what is none', () => {
    const { places, fault } = withPlaces([], '38°42′N 9°6′W\n-33.9, 18.4')
    expect(fault).toBeNull()
    expect(placesText(places!)).toBe('38.7,-9.1;-33.9,18.4')
    expect(questionOf({ at: placesText(places!) }).places).toEqual([[-9.1, 38.7], [18.4, -33.9]])
    const broken = questionOf({ at: '10,20;nowhere;95,0' })
    expect(broken.places).toEqual([[20, 10]])
    expect(broken.faults).toHaveLength(2)
    expect(broken.faults[0]).toMatch(/^“nowhere” in the address: /)
    expect(placesText([])).toBeUndefined()
  })

  it('refuses nothing, twice the same and too many', () => {
    expect(withPlaces([], ' ').fault).toMatch(/first/)
    expect(withPlaces([[20, 10]], '10, -340').fault).toMatch(/already/)
    expect(withPlaces([], '100, 0').fault).toMatch(/^“100, 0”: Latitude 100° is outside/)
    expect(withPlaces([], Array.from({ length: mostPlaces + 1 }, (_, i) => `${i}, 0`).join(';')).fault).toMatch(/At most 40/)
  })
})

describe('the view of an answer', () => {
  const latitudesDeg = Array.from({ length: 37 }, (_, i) => -90 + 5 * i)
  const longitudesDeg = Array.from({ length: 73 }, (_, j) => -180 + 5 * j)
  const nodes = latitudesDeg.flatMap(lat => longitudesDeg.map(lon => ({ lon, lat })))
  const answer: SeaLevelAnswer = {
    unit: 'mm per year', feedback: true, degree: 128, barystaticMm: 0.5, stepDeg: 5, latitudesDeg, longitudesDeg,
    seaLevelMm: nodes.map(({ lat }) => 0.5 - lat / 100), sea: nodes.map(({ lon }) => lon > 0 && lon < 90 ? 0 : 1),
    places: [{ latitudeDeg: 0, longitudeDeg: 45, seaLevelMm: 0.5, relative: 1 }, { latitudeDeg: 60, longitudeDeg: -170, seaLevelMm: -0.1, relative: -0.2 }],
  }
  const subject = { subject: 'For A,', unit: 'mm per year', sigma: null }
  const question = { feedback: true, as: 'mm' as const, places: [], faults: [] }

  it('marks places and says which lie inland', () => {
    const view = seaLevelView(answer, [], question, subject)
    expect(view.places.map(({ mark, inland, relative }) => ({ mark, inland, relative }))).toEqual([{ mark: '1', inland: true, relative: 1 }, { mark: '2', inland: false, relative: -0.2 }])
    expect(view.map.places).toEqual([{ mark: '1', position: [45, 0] }, { mark: '2', position: [-170, 60] }])
    expect(view.map.unit).toBe('mm per year')
  })

  it('divides by the mean where there is one', () => {
    const view = seaLevelView(answer, [], { ...question, as: 'mean' }, subject)
    expect(view.map.contours.mean).toBe(1)
    expect(view.map.unit).toBe('= 0.500\u00a0mm per year')
    expect(Math.max(...view.map.contours.levels)).toBe(2)
    expect(Math.max(...seaLevelView(answer, [], question, subject).map.contours.levels)).toBe(1.2)
    const none = seaLevelView({ ...answer, barystaticMm: 0 }, [], { ...question, as: 'mean' }, subject)
    expect([none.hasMean, none.map.contours.mean, none.map.unit, none.places[0]!.relative]).toEqual([false, null, 'mm per year', null])
  })

  it('carries far less than the grid', () => {
    const { places: _, ...view } = seaLevelView(answer, [], question, subject)
    expect(JSON.stringify(view).length).toBeLessThan(JSON.stringify(answer).length)
  })
})
