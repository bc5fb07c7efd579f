/**
 * Exponential and logarithm made of additions, multiplications and divisions alone, so that a fit has the same bits in every browser and in Node:
 * the language leaves the last bits of Math.exp and Math.log to each engine, and engines differ.
 */

const LN2 = 0.6931471805599453
/** ln 2 in two parts: the first has so few digits that its small multiples are exact. */
const LN2_HIGH = 0.693147180369123816490, LN2_LOW = 1.90821492927058770002e-10
/** Beyond these exp is Infinity or 0. */
const HIGHEST = 709.782712893384, LOWEST = -745.1332191019411

const bits = new DataView(new ArrayBuffer(8))

/** 2^k for −1074 ≤ k ≤ 1023. */
function powerOfTwo(k: number): number {
  if (k < -1022) return powerOfTwo(k + 60) * 8.673617379884035e-19
  bits.setUint32(0, (k + 1023) << 20)
  bits.setUint32(4, 0)
  return bits.getFloat64(0)
}

/** Coefficients of the Taylor series of (e^r − 1)/r: 1/1!, 1/2!, … 1/14!; enough for |r| ≤ ln 2 / 2 [1]. */
const INVERSE_FACTORIALS = Array.from({ length: 14 }, (_, i) => {
  let factorial = 1
  for (let j = 2; j <= i + 1; j++) factorial *= j
  return 1 / factorial
})
/** e^r − 1 for |r| ≤ ln 2 / 2. */
function smallExpm1(r: number): number {
  let sum = 0
  for (let i = INVERSE_FACTORIALS.length - 1; i > 0; i--) sum = (sum + INVERSE_FACTORIALS[i]!) * r
  return r + sum * r
}

/**
 * e^x.
 * @param x - [1]
 * @returns within 1 unit of the last place of the true value, the same on every machine [1]
 */
export function exp(x: number): number {
  if (!(x < HIGHEST)) return x > HIGHEST ? Infinity : x === HIGHEST ? Number.MAX_VALUE : NaN
  if (x < LOWEST) return 0
  const k = Math.round(x / LN2)
  if (k === 0) return 1 + smallExpm1(x)
  const r = x - k * LN2_HIGH - k * LN2_LOW, value = 1 + smallExpm1(r)
  return k > 1023 ? value * 2 * powerOfTwo(k - 1) : value * powerOfTwo(k)
}

/**
 * e^x − 1, without loss where x is small.
 * @param x - [1]
 * @returns within 2 units of the last place [1]
 */
export function expm1(x: number): number {
  if (x > -0.34 && x < 0.34) return smallExpm1(x)
  if (x > 40 || x < -40) return exp(x) - 1
  // e^x − 1 = 2^k·(e^r − 1) + (2^k − 1)
  const k = Math.round(x / LN2), power = powerOfTwo(k)
  return power * smallExpm1(x - k * LN2_HIGH - k * LN2_LOW) + (power - 1)
}

/** ln((1+z)/(1−z)) = 2(z + z³/3 + z⁵/5 + …), for |z| ≤ 0.172. */
function artanhTwice(z: number): number {
  const square = z * z
  let sum = 0
  for (let n = 21; n >= 3; n -= 2) sum = (sum + 1 / n) * square
  return 2 * z + 2 * z * sum
}

/**
 * Natural logarithm.
 * @param x - above 0 [1]
 * @returns within 2 units of the last place; −Infinity at 0, NaN below [1]
 */
export function log(x: number): number {
  if (!(x > 0)) return x === 0 ? -Infinity : NaN
  if (x === Infinity) return Infinity
  let exponent = 0, from = x
  if (x < 2.2250738585072014e-308) {
    from = x * 18014398509481984
    exponent = -54
  }
  bits.setFloat64(0, from)
  const high = bits.getUint32(0)
  exponent += (high >>> 20) - 1023
  bits.setUint32(0, (high & 0xFFFFF) | 0x3FF00000)
  let mantissa = bits.getFloat64(0)
  if (mantissa > 1.4142135623730951) {
    mantissa /= 2
    exponent++
  }
  return exponent * LN2_HIGH + (artanhTwice((mantissa - 1) / (mantissa + 1)) + exponent * LN2_LOW)
}

/**
 * ln(1 + x), without loss where x is small.
 * @param x - above −1 [1]
 * @returns within 3 units of the last place [1]
 */
export function log1p(x: number): number {
  if (x > -0.29 && x < 0.41) return artanhTwice(x / (2 + x))
  return log(1 + x)
}
