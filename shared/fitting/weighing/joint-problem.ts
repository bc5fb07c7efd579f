/** One explanation on several conditions at once: which parameter stands where, residuals and derivatives. */
import type { LeastSquaresProblem } from '../least-squares'
import { boundsOf, DEPLETION, type ExplanationModel } from './explanations'
import type { WeighCondition, WeighData } from './prepare'

/** What a manipulation changes: a shape parameter by place, or the depletion (place = number of shape parameters). */
export type Changes = ReadonlyMap<string, number>
export type TypedDepletion = Readonly<Record<string, number>>

export interface Slot {
  /** Place among the model's parameters; the depletion comes last. */
  place: number
  /** Set where this is the value under a manipulation. */
  manipulation: string | null
  /** Set where this is a depletion. */
  protocol: string | null
}

/** Where each condition finds its parameters: slot numbers, −1 for a typed depletion (or for what the first protocol has not). */
export interface Layout { slots: Slot[], of: Int32Array[], lower: number[], upper: number[] }

const LEAST_DEPLETION = 0.05
const LONGEST_STEP = 3

class LayoutBuilder {
  readonly slots: Slot[] = []

  find(slot: Slot): number {
    const at = this.slots.findIndex(one => one.place === slot.place && one.manipulation === slot.manipulation && one.protocol === slot.protocol)
    return at >= 0 ? at : this.slots.push(slot) - 1
  }
}

/**
 * Lays out the parameters of a model: shape, depletion of each protocol, then what the manipulations change.
 * @param model - the explanation
 * @param conditions - fitted together
 * @param changes - per manipulation; one without an entry changes nothing
 * @param data - for the bounds
 * @param typed - depletion of protocols that are not fitted
 * @returns the layout
 */
export function layOut(model: ExplanationModel, conditions: readonly WeighCondition[], changes: Changes, data: WeighData, typed: TypedDepletion = {}): Layout {
  const builder = new LayoutBuilder(), shape = model.parameters.length
  for (let place = 0; place < shape; place++) if (place !== model.perProtocol) builder.find({ place, manipulation: null, protocol: null })
  const depletionOf = ({ protocol, manipulation }: WeighCondition): Slot => ({ place: shape, protocol, manipulation: changes.get(manipulation) === shape ? manipulation : null })
  const free = conditions.filter(one => typed[one.protocol] === undefined)
  for (const one of free) if (changes.get(one.manipulation) !== shape) builder.find(depletionOf(one))
  for (const one of free) builder.find(depletionOf(one))
  const of = conditions.map((one) => {
    const places = Int32Array.from({ length: shape + 1 }, (_, place) => {
      if (place === shape) return typed[one.protocol] === undefined ? builder.find(depletionOf(one)) : -1
      if (place === model.perProtocol) return one.protocol === data.protocols[0] ? -1 : builder.find({ place, manipulation: null, protocol: one.protocol })
      return builder.find({ place, manipulation: changes.get(one.manipulation) === place ? one.manipulation : null, protocol: null })
    })
    return places
  })
  const bounds = builder.slots.map(({ place }) => place === shape ? [LEAST_DEPLETION, 1] as const : boundsOf(model.parameters[place]!, data.first, data.last))
  return { slots: builder.slots, of, lower: bounds.map(([low]) => low), upper: bounds.map(([, high]) => high) }
}

/** Name of a shape parameter, or `depletion` for the place after the last. @param place - [1] */
export const placeName = (model: ExplanationModel, place: number): string => model.parameters[place]?.name ?? DEPLETION

/** Residuals over standard errors (or whitened by the cells' covariance); buffers are made once. */
export class JointProblem implements LeastSquaresProblem {
  readonly points: number
  readonly parameters: number
  readonly lower: number[]
  readonly upper: number[]
  readonly stepLimit: number[]
  private readonly local: Float64Array
  private readonly ratio: Float64Array[]
  private readonly by: Float64Array[]

  constructor(readonly model: ExplanationModel, readonly conditions: readonly WeighCondition[], readonly layout: Layout, private readonly typed: TypedDepletion = {}) {
    this.points = conditions.reduce((sum, one) => sum + one.times.length, 0)
    this.parameters = layout.slots.length
    this.lower = layout.lower
    this.upper = layout.upper
    this.stepLimit = layout.slots.map(({ place }) => model.parameters[place]?.log ? LONGEST_STEP : Infinity)
    this.local = new Float64Array(model.parameters.length + 1)
    this.ratio = conditions.map(one => new Float64Array(one.times.length))
    this.by = conditions.map(one => new Float64Array(one.times.length * this.local.length))
  }

  /** Parameters of one condition, in the model's order. */
  localOf(at: ArrayLike<number>, c: number): Float64Array {
    const of = this.layout.of[c]!
    for (let place = 0; place < of.length; place++) this.local[place] = of[place]! >= 0 ? at[of[place]!]! : place === of.length - 1 ? this.typed[this.conditions[c]!.protocol]! : 0
    return this.local
  }

  /** An own property: profiles spread the problem with other bounds. */
  readonly evaluate = (at: Float64Array, residuals: Float64Array, jacobian: Float64Array | null): boolean => {
    jacobian?.fill(0)
    let row = 0
    for (let c = 0; c < this.conditions.length; c++) {
      const one = this.conditions[c]!, ratio = this.ratio[c]!, by = jacobian ? this.by[c]! : null
      this.model.curve(this.localOf(at, c), one.times, ratio, by)
      if (one.whiten) this.whitened(one, c, row, residuals, jacobian)
      else this.weighted(one, c, row, residuals, jacobian)
      row += one.times.length
    }
    return true
  }

  private weighted(one: WeighCondition, c: number, row: number, residuals: Float64Array, jacobian: Float64Array | null): void {
    const ratio = this.ratio[c]!, by = this.by[c]!, of = this.layout.of[c]!, width = of.length, n = this.parameters
    for (let i = 0; i < ratio.length; i++) {
      const error = one.error[i]!
      residuals[row + i] = (ratio[i]! - one.ratio[i]!) / error
      if (!jacobian) continue
      for (let place = 0; place < width; place++) if (of[place]! >= 0) jacobian[(row + i) * n + of[place]!]! += by[i * width + place]! / error
    }
  }

  private whitened(one: WeighCondition, c: number, row: number, residuals: Float64Array, jacobian: Float64Array | null): void {
    const ratio = this.ratio[c]!, by = this.by[c]!, of = this.layout.of[c]!, width = of.length, n = this.parameters, m = ratio.length, factor = one.whiten!
    for (let i = 0; i < m; i++) {
      let sum = 0
      for (let j = 0; j <= i; j++) {
        const weight = factor[i * m + j]!
        sum += weight * (ratio[j]! - one.ratio[j]!)
        if (!jacobian) continue
        for (let place = 0; place < width; place++) if (of[place]! >= 0) jacobian[(row + i) * n + of[place]!]! += weight * by[j * width + place]!
      }
      residuals[row + i] = sum
    }
  }

  /** χ² without derivatives, for scans. */
  chi2At(at: Float64Array, scratch: Float64Array): number {
    this.evaluate(at, scratch, null)
    let sum = 0
    for (let i = 0; i < this.points; i++) sum += scratch[i]! * scratch[i]!
    return sum
  }
}
