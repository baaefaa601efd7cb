export const oceanModes = ['none', 'uniform', 'fingerprint', 'fingerprint-rotation'] as const
export type OceanMode = typeof oceanModes[number]

export const coefficientSetIds = ['gross-2007', 'eubanks-1993', 'barnes-1983'] as const
export type CoefficientSetId = typeof coefficientSetIds[number]

export const coreChoices = ['decoupled', 'coupled'] as const
export type CoreChoice = typeof coreChoices[number]

export const liquidKinds = ['aquifer', 'basin', 'lake', 'reservoir', 'soil-water', 'snow-water'] as const
export const iceKinds = ['ice-sector', 'glacier-region'] as const
export const regionKinds = [...liquidKinds, ...iceKinds] as const
export type RegionKind = typeof regionKinds[number]

export const roles = ['administrator', 'lead', 'hydrologist', 'glaciologist', 'reader'] as const
export type Role = typeof roles[number]

export type Position = [number, number]
export interface Polygon { type: 'Polygon', coordinates: Position[][] }
export interface MultiPolygon { type: 'MultiPolygon', coordinates: Position[][][] }
/** A region's outline as it is stored: WGS 84 longitude and geodetic latitude in degrees (RFC 7946). */
export type Outline = Polygon | MultiPolygon

/** A figure with its one-sigma error under white noise and under the noise model that is quoted. */
export interface Measured { value: number, sigmaWhite: number, sigma: number }

export interface PhysicsSettings { ocean: OceanMode, coefficients: CoefficientSetId, core: CoreChoice }
