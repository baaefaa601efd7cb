import { DEGREE } from '../earth/constants.ts'
import { zoneAreaM2 } from '../earth/latitude.ts'
import type { RingPath } from '../earth/rings.ts'

// Six-point Gauss–Legendre rule on [0, 1]: 1e-13 relative over a quarter of a meridian.
const nodes = [0.033_765_242_898_424, 0.169_395_306_766_867_7, 0.380_690_406_958_401_5]
const weights = [0.085_662_246_189_585_2, 0.180_380_786_524_069_3, 0.233_956_967_286_345_5]

/**
 * Area between the equator and an edge that is straight in longitude and latitude, m² on the WGS 84 ellipsoid, signed by the
 * edge's direction and hemisphere.
 */
export function areaUnderEdgeM2(lon0: number, lat0: number, lon1: number, lat1: number): number {
  const radians = (lon1 - lon0) * DEGREE
  if (radians === 0) return 0
  if (lat0 === lat1) return radians * zoneAreaM2(Math.sin(lat0 * DEGREE))
  const rise = lat1 - lat0
  let mean = 0
  for (let k = 0; k < 3; k++) {
    const near = zoneAreaM2(Math.sin((lat0 + rise * nodes[k]!) * DEGREE))
    const far = zoneAreaM2(Math.sin((lat1 - rise * nodes[k]!) * DEGREE))
    mean += weights[k]! * (near + far)
  }
  return radians * mean
}

/** Area inside one ring on the WGS 84 ellipsoid, m²; of a ring round a pole that of its smaller side. */
export function ringAreaM2({ lonDeg, latDeg, winding }: RingPath): number {
  let sum = 0
  for (let k = 1; k < lonDeg.length; k++) sum += areaUnderEdgeM2(lonDeg[k - 1]!, latDeg[k - 1]!, lonDeg[k]!, latDeg[k]!)
  return winding === 0 ? Math.abs(sum) : 2 * Math.PI * zoneAreaM2(1) - Math.abs(sum)
}
