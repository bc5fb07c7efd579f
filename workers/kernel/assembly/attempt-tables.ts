// Rows of cells made from solved laws: waiting times per class of starts, and first attempts of a run.
import { aliasRow } from './alias'

/** Cells of a waiting row after the explicit steps: late with the parity of steps + 1, of steps + 2, and gone. */
export const LATE_CELLS: i32 = 3

/**
 * One class's waiting row of `steps` + 3 cells: outcome k < steps is a wait of k + 1 steps.
 * `waits` are f32, `stride` bytes apart; `room` holds 2·(steps + 3) f64.
 */
export function makeWaitRow(waits: usize, stride: usize, steps: i32, lateFirst: f64, lateSecond: f64, gone: f64, cells: usize, room: usize): void {
  let total: f64 = 0
  let at = room
  for (let step = 0; step < steps; step++) {
    const weight = <f64>load<f32>(waits)
    waits += stride
    store<f64>(at, weight)
    at += 8
    total += weight
  }
  store<f64>(at, lateFirst)
  store<f64>(at, lateSecond, 8)
  store<f64>(at, gone, 16)
  const count = steps + LATE_CELLS
  aliasRow(room, count, total + lateFirst + lateSecond + gone, cells, room + (<usize>count << 3))
}

/**
 * One class's row of first attempts at steps 0 … steps − 1: weight of step n is the chance of no attempt within n steps before it (time runs both ways alike).
 * Returns the sum of the weights.
 */
export function makeEarlyRow(waits: usize, stride: usize, steps: i32, cells: usize, room: usize): f64 {
  let left: f64 = 1
  let total: f64 = 0
  for (let step = 0; step < steps; step++) {
    const weight = max(0, left)
    store<f64>(room + (<usize>step << 3), weight)
    total += weight
    left -= <f64>load<f32>(waits)
    waits += stride
  }
  aliasRow(room, steps, total, cells, room + (<usize>steps << 3))
  return total
}

/** A row from weights that the host has written (f64, destroyed). */
export function makeRow(weights: usize, count: i32, cells: usize, room: usize): void {
  let total: f64 = 0
  for (let i = 0; i < count; i++) total += load<f64>(weights + (<usize>i << 3))
  aliasRow(weights, count, total, cells, room)
}
