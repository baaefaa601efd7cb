// Made by scripts/make-earth-model.ts from Natural Earth 1:50m land (npm world-atlas 2.0.2, land-50m.json); do not edit.

/** Ocean function: Caspian and lakes land, ice shelves sea, coastlines mapped to geocentric latitude. Exact contour integrals. */
export const oceanMeans = {
  /** Part of the sphere that is sea. */
  fraction: 0.711434682153977,
  /** Area of the sea on the sphere, m². */
  areaM2: 362877555451176.3,
  /** Means over the sea of sin ψ cos ψ cos λ, sin ψ cos ψ sin λ and cos² ψ. */
  means: { xz: -0.015055560216260528, yz: -0.02228036692980395, cos2: 0.6886249835315634 },
  /** Mean unit vector over the sea. */
  vector: { x: -0.08800361305396369, y: -0.048908032958795596, z: -0.09962035130752542 },
  /** The three means times r²/R², from the cells. */
  ellipsoidMeans: { xz: -0.01506685927257214, yz: -0.022281171015360524, cos2: 0.6892759615296976 },
  sourceSha256: '619477ff690c086885e45cb91707d783805561bd75ae8e437b7d4694b0204e0f',
  /** SHA-256 of the encoded cells. */
  sha256: 'fd867c65a5713cd52585de7e41b1b540626bfac35d462aaf629656afab479826'
} as const
