/** SHA-256 of bytes as lower-case hex. FIPS 180-4; in plain code, since browsers offer theirs on secure origins only. */
export function sha256Hex(bytes: Uint8Array): string {
  const k = roundConstants()
  const h = initialHash()
  const padded = new Uint8Array(((bytes.length + 8) >> 6) * 64 + 64)
  padded.set(bytes)
  padded[bytes.length] = 0x80
  const view = new DataView(padded.buffer)
  view.setUint32(padded.length - 8, Math.floor(bytes.length / 0x20000000))
  view.setUint32(padded.length - 4, (bytes.length << 3) >>> 0)
  const w = new Int32Array(64)
  for (let block = 0; block < padded.length; block += 64) {
    for (let i = 0; i < 16; i++) w[i] = view.getInt32(block + 4 * i)
    for (let i = 16; i < 64; i++) {
      const a = w[i - 15]!
      const b = w[i - 2]!
      const s0 = ((a >>> 7) | (a << 25)) ^ ((a >>> 18) | (a << 14)) ^ (a >>> 3)
      const s1 = ((b >>> 17) | (b << 15)) ^ ((b >>> 19) | (b << 13)) ^ (b >>> 10)
      w[i] = (w[i - 16]! + s0 + w[i - 7]! + s1) | 0
    }
    compress(h, w, k)
  }
  return Array.from(h, word => (word >>> 0).toString(16).padStart(8, '0')).join('')
}

function compress(state: Int32Array, w: Int32Array, k: Int32Array): void {
  let a = state[0]!
  let b = state[1]!
  let c = state[2]!
  let d = state[3]!
  let e = state[4]!
  let f = state[5]!
  let g = state[6]!
  let h = state[7]!
  for (let i = 0; i < 64; i++) {
    const s1 = ((e >>> 6) | (e << 26)) ^ ((e >>> 11) | (e << 21)) ^ ((e >>> 25) | (e << 7))
    const t1 = (h + s1 + ((e & f) ^ (~e & g)) + k[i]! + w[i]!) | 0
    const s0 = ((a >>> 2) | (a << 30)) ^ ((a >>> 13) | (a << 19)) ^ ((a >>> 22) | (a << 10))
    const t2 = (s0 + ((a & b) ^ (a & c) ^ (b & c))) | 0
    h = g
    g = f
    f = e
    e = (d + t1) | 0
    d = c
    c = b
    b = a
    a = (t1 + t2) | 0
  }
  state[0] = (state[0]! + a) | 0
  state[1] = (state[1]! + b) | 0
  state[2] = (state[2]! + c) | 0
  state[3] = (state[3]! + d) | 0
  state[4] = (state[4]! + e) | 0
  state[5] = (state[5]! + f) | 0
  state[6] = (state[6]! + g) | 0
  state[7] = (state[7]! + h) | 0
}

function firstPrimes(count: number): number[] {
  const primes: number[] = []
  for (let n = 2; primes.length < count; n++) if (primes.every(p => n % p !== 0)) primes.push(n)
  return primes
}

/** First 32 bits of the fractional part of a root of a prime, in whole numbers: floats lack the bits to be sure. */
function fraction(prime: number, power: 2 | 3): number {
  const shifted = BigInt(prime) << BigInt(32 * power)
  let root = BigInt(Math.floor(Math.pow(prime, 1 / power) * 2 ** 32))
  while (root ** BigInt(power) > shifted) root--
  while ((root + 1n) ** BigInt(power) <= shifted) root++
  return Number(BigInt.asIntN(32, root))
}

function roundConstants(): Int32Array {
  return Int32Array.from(firstPrimes(64), prime => fraction(prime, 3))
}

function initialHash(): Int32Array {
  return Int32Array.from(firstPrimes(8), prime => fraction(prime, 2))
}
