/**
 * Physical and geometric constants of the engine, each with its source and the digits that the source prints.
 * Products of these are formed where they are used; no rounded twin of any of them exists elsewhere.
 */

/** Mean radius of the sphere that loads and coastlines are mapped to, m. Gross (2007), Treatise on Geophysics 3. */
export const EARTH_RADIUS_M = 6.371e6
/** Mass of the Earth, kg. Gross (2007). */
export const EARTH_MASS_KG = 5.9737e24
/** Mean rotation rate, rad/s. Gross (2007); IERS Conventions (2010). */
export const ROTATION_RATE = 7.292115e-5
/** Mean length of day, s: the factor between χ₃ and ΔLOD. */
export const DAY_SECONDS = 86_400

/** Greatest principal moment of inertia of the whole Earth, kg m². Gross (2007). */
export const POLAR_MOMENT = 8.0365e37
/** C − (A + B)/2 of the whole Earth, kg m², from C − A = 2.6398e35 and C − B = 2.6221e35. Gross (2007). */
export const DYNAMICAL_FLATTENING_MOMENT = 2.63095e35
/** Equatorial moment A′ = (A + B)/2 of the whole Earth, kg m², A = 8.0101e37 and B = 8.0103e37. Gross (2007). */
export const EQUATORIAL_MOMENT = (8.0101e37 + 8.0103e37) / 2
/** Polar moment of the mantle, kg m²: the decoupled axial response. Gross (2007). */
export const MANTLE_POLAR_MOMENT = 7.1236e37
/** Equatorial moment of the mantle, kg m². Gross (2007). */
export const MANTLE_EQUATORIAL_MOMENT = 7.0999e37

/** Rotational response factor of χ₁, χ₂ with the equilibrium ocean pole tide inside. Gross (2007), from memory. */
export const ROTATIONAL_FACTOR = 1.608
/** Chandler wobble: k₂ of the oceans and the secular k, by which the ocean pole tide is taken out of the factor. Gross (2007). */
export const OCEAN_K2 = 0.047715
export const SECULAR_K = 0.942
/** Rotational response factor without the ocean pole tide: for use with rotational feedback in the sea-level equation, ~1.4869. */
export const ROTATIONAL_FACTOR_OCEAN_FREE = 1 / (1 / ROTATIONAL_FACTOR + OCEAN_K2 / SECULAR_K)
/** 1 + k′₂ + Δk′ₐₙ of the load, as it enters χ₁ and χ₂: 1 − 0.305 − 0.011. Gross (2007), from memory. */
export const LOAD_FACTOR = 0.684
/** Rotational and load factors of χ₃; their product is 0.74775. Gross (2007): 0.997 confirmed, 0.750 from memory. */
export const AXIAL_ROTATIONAL_FACTOR = 0.997
export const AXIAL_LOAD_FACTOR = 0.750
/** 1 + k′₂ of an elastic Earth under load, PREM, to three digits: the whole Earth's a_z, and the yielding inside ΔJ₂. */
export const ELASTIC_LOAD_FACTOR = 0.695

/** Tidal Love numbers of degree 2 and gravity in the rotational feedback. Wahr (1981), PREM; standard gravity, m/s². */
export const TIDAL_K2 = 0.298
export const TIDAL_H2 = 0.604
export const GRAVITY = 9.80665

/** Density of the water that moves, kg/m³: 1 Gt of it is 1 km³. */
export const WATER_DENSITY = 1000
/** Kilograms of a gigatonne. */
export const KG_PER_GT = 1e12

/** WGS 84: semi-major axis (m) and flattening. NIMA TR8350.2. */
export const WGS84_A = 6_378_137
export const WGS84_F = 1 / 298.257223563
/** WGS 84: first eccentricity squared. */
export const WGS84_E2 = WGS84_F * (2 - WGS84_F)

/** Chandler period (d) and quality factor. Gross (2007), from memory; the IERS constants have 433.1 d and 170. */
export const CHANDLER_PERIOD_DAYS = 433
export const CHANDLER_Q = 179

export const DEGREE = Math.PI / 180
/** One milliarcsecond in radians. */
export const MAS = DEGREE / 3_600_000
/** Movement of the pole on the sphere, mm per mas: 30.887. */
export const POLE_MM_PER_MAS = MAS * EARTH_RADIUS_M * 1000
