/** WGS 84 semi-major axis, metres, and flattening (NIMA TR8350.2, 2000, table 3.1). */
const semiMajorM = 6_378_137
const flattening = 1 / 298.257_223_563
const eccentricity = Math.sqrt(flattening * (2 - flattening))
const semiMinorM = semiMajorM * (1 - flattening)

/**
 * Area of the WGS 84 ellipsoid between the equator and a geodetic latitude, per radian of longitude, in m²; odd in latitude.
 * Closed form: Snyder, Map Projections – A Working Manual (1987), eq. 3-12, times a²/2.
 */
export function zoneAreaM2PerRadian(latitudeDeg: number): number {
  const s = Math.sin(latitudeDeg * Math.PI / 180)
  const es = eccentricity * s
  return semiMinorM * semiMinorM / 2 * (s / (1 - es * es) + Math.atanh(es) / eccentricity)
}

// Six-point Gauss–Legendre rule on [0, 1]: 1e-13 relative over a quarter of a meridian.
const nodes = [0.033_765_242_898_423_99, 0.169_395_306_766_867_74, 0.380_690_406_958_401_55]
const weights = [0.085_662_246_189_585_17, 0.180_380_786_524_069_3, 0.233_956_967_286_345_52]

/**
 * Area between the equator and an edge that is straight in longitude and latitude, m² on the WGS 84 ellipsoid, signed by the
 * edge's direction and hemisphere.
 */
export function areaUnderEdgeM2(lon0: number, lat0: number, lon1: number, lat1: number): number {
  const radians = (lon1 - lon0) * Math.PI / 180
  if (radians === 0) return 0
  if (lat0 === lat1) return radians * zoneAreaM2PerRadian(lat0)
  const rise = lat1 - lat0
  let mean = 0
  for (let k = 0; k < 3; k++) {
    const near = zoneAreaM2PerRadian(lat0 + rise * nodes[k]!)
    const far = zoneAreaM2PerRadian(lat1 - rise * nodes[k]!)
    mean += weights[k]! * (near + far)
  }
  return radians * mean
}
