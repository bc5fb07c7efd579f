/**
 * NIST Statistical Reference Datasets, nonlinear regression: models with analytic derivatives, starts, certified values.
 * Source: US National Institute of Standards and Technology, StRD, https://www.itl.nist.gov/div898/strd/ (public domain).
 */

export interface NistSet {
  name: string
  /** Writes the derivatives by the parameters into `by`, where given, and returns the model's value. */
  model(b: ArrayLike<number>, x: number, by: Float64Array | null): number
  starts: [number[], number[]]
  certified: number[]
  standardErrors: number[]
  rss: number
}

const growth: NistSet['model'] = (b, x, by) => {
  const left = Math.exp(-b[1]! * x), filled = -Math.expm1(-b[1]! * x)
  if (by) by.set([filled, b[0]! * x * left])
  return b[0]! * filled
}

const threeDecays: NistSet['model'] = (b, x, by) => {
  let sum = 0
  for (let k = 0; k < 6; k += 2) {
    const left = Math.exp(-b[k + 1]! * x)
    sum += b[k]! * left
    if (by) by.set([left, -b[k]! * x * left], k)
  }
  return sum
}
const LANCZOS_STARTS: NistSet['starts'] = [[1.2, 0.3, 5.6, 5.5, 6.5, 7.6], [0.5, 0.7, 3.6, 4.2, 4, 6.3]]

export const NIST_SETS: NistSet[] = [
  { name: 'Misra1a', model: growth, starts: [[500, 1e-4], [250, 5e-4]], certified: [238.94212918, 5.5015643181e-4], standardErrors: [2.7070075241, 7.2668688436e-6], rss: 0.12455138894 },
  { name: 'BoxBOD', model: growth, starts: [[1, 1], [100, 0.75]], certified: [213.80940889, 0.54723748542], standardErrors: [12.354515176, 0.10455993237], rss: 1168.0088766 },
  {
    name: 'MGH17',
    model: (b, x, by) => {
      const fast = Math.exp(-b[3]! * x), slow = Math.exp(-b[4]! * x)
      if (by) by.set([1, fast, slow, -b[1]! * x * fast, -b[2]! * x * slow])
      return b[0]! + b[1]! * fast + b[2]! * slow
    },
    starts: [[50, 150, -100, 1, 2], [0.5, 1.5, -1, 0.01, 0.02]],
    certified: [0.37541005211, 1.9358469127, -1.4646871366, 0.012867534640, 0.022122699662],
    standardErrors: [2.0723153551e-3, 0.22031669222, 0.22175707739, 4.4861358114e-4, 8.9471996575e-4], rss: 5.4648946975e-5,
  },
  {
    name: 'Lanczos3', model: threeDecays, starts: LANCZOS_STARTS,
    certified: [0.086816414977, 0.95498101505, 0.84400777463, 2.9515951832, 1.5825685901, 4.9863565084],
    standardErrors: [0.017197908859, 0.097041624475, 0.041488663282, 0.10766312506, 0.058371576281, 0.034436403035], rss: 1.6117193594e-8,
  },
  {
    name: 'Lanczos2', model: threeDecays, starts: LANCZOS_STARTS,
    certified: [0.096251029939, 1.0057332849, 0.86424689056, 3.0078283915, 1.5529016879, 5.0028798100],
    standardErrors: [6.6770575477e-4, 3.3989646176e-3, 1.7185846685e-3, 4.1707005856e-3, 2.3744381417e-3, 1.3958787284e-3], rss: 2.2299428125e-11,
  },
  {
    name: 'Lanczos1', model: threeDecays, starts: LANCZOS_STARTS,
    certified: [0.095100000027, 1.0000000001, 0.86070000013, 3.0000000002, 1.5575999998, 5.0000000001],
    standardErrors: [5.3347304234e-11, 2.7473038179e-10, 1.3576062225e-10, 3.3308253069e-10, 1.8815731448e-10, 1.1057500538e-10], rss: 1.4307867721e-25,
  },
  {
    name: 'DanWood',
    model: (b, x, by) => {
      const power = x ** b[1]!
      if (by) by.set([power, b[0]! * power * Math.log(x)])
      return b[0]! * power
    },
    starts: [[1, 5], [0.7, 4]], certified: [0.76886226176, 3.8604055871], standardErrors: [0.018281973860, 0.051726610913], rss: 4.3173084083e-3,
  },
  {
    name: 'MGH09',
    model: (b, x, by) => {
      const above = x * x + b[1]! * x, below = x * x + b[2]! * x + b[3]!, ratio = above / below
      if (by) by.set([ratio, b[0]! * x / below, -b[0]! * ratio * x / below, -b[0]! * ratio / below])
      return b[0]! * ratio
    },
    starts: [[25, 39, 41.5, 39], [0.25, 0.39, 0.415, 0.39]],
    certified: [0.19280693458, 0.19128232873, 0.12305650693, 0.13606233068],
    standardErrors: [0.011435312227, 0.19633220911, 0.080842031232, 0.090025542308], rss: 3.0750560385e-4,
  },
  {
    name: 'Eckerle4',
    model: (b, x, by) => {
      const z = (x - b[2]!) / b[1]!, value = b[0]! / b[1]! * Math.exp(-z * z / 2)
      if (by) by.set([value / b[0]!, value * (z * z - 1) / b[1]!, value * z / b[1]!])
      return value
    },
    starts: [[1, 10, 500], [1.5, 5, 450]], certified: [1.5543827178, 4.0888321754, 451.54121844], standardErrors: [0.015408051163, 0.046803020753, 0.046800518816], rss: 1.4635887487e-3,
  },
  {
    name: 'Chwirut2',
    model: (b, x, by) => {
      const below = b[1]! + b[2]! * x, value = Math.exp(-b[0]! * x) / below
      if (by) by.set([-x * value, -value / below, -x * value / below])
      return value
    },
    starts: [[0.1, 0.01, 0.02], [0.15, 0.008, 0.01]], certified: [0.16657666537, 5.1653291286e-3, 0.012150007096], standardErrors: [0.038303286810, 6.6621605126e-4, 1.5304234767e-3], rss: 513.04802941,
  },
  {
    name: 'MGH10',
    model: (b, x, by) => {
      const below = x + b[2]!, power = Math.exp(b[1]! / below), value = b[0]! * power
      if (by) by.set([power, value / below, -value * b[1]! / (below * below)])
      return value
    },
    starts: [[2, 4e5, 25000], [0.02, 4000, 250]], certified: [5.6096364710e-3, 6181.3463463, 345.22363462], standardErrors: [1.5687892471e-4, 23.309021107, 0.78486103508], rss: 87.945855171,
  },
]
