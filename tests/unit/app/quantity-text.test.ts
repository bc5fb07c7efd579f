/** What a quantity field reads and says: limits in the shown unit, offers instead of guesses, steps of the arrows. */
import { describe, expect, it } from 'vitest'
import { readQuantity, stepped } from '../../../app/composables/useQuantityText'

const probability = { min: 0, max: 1, what: 'A probability lies between 0 and 1.' }
const diameter = { min: 5, max: 500 }

describe('reading a field', () => {
  it.each(['0.30', '0,30', '.3', '3e-1', '\uFF10.3', '30 %'])('reads %s as the probability 0.3', text => expect(readQuantity(text, '1', '1', probability, '.')).toEqual({ value: 0.3 }))
  it('offers 30 % for 30 and does not scale it', () => {
    const { value, problem } = readQuantity('30', '1', '1', probability, '.')
    expect(value).toBeUndefined()
    expect(problem).toBe('A probability lies between 0 and 1. If you mean 30 %, type 0.3.')
  })
  it.each(['', '  ', '0x10', 'Infinity', 'NaN', '1e400', '1.2.3', '5;', '-0.1', '1.0001'])('takes no value from “%s”', (text) => {
    const reading = readQuantity(text, '1', '1', probability, '.')
    expect(reading.value).toBeUndefined()
    expect(reading.problem).toMatch(/\.$/)
  })
  it('stores 50 nm for 50 nm and for 0.05 µm, to the last bit', () => {
    expect(readQuantity('50', 'nm', 'nm', diameter, '.').value).toBe(50)
    expect(readQuantity('0.05', 'µm', 'nm', diameter, '.').value).toBe(50)
    expect(readQuantity('0.05 um', 'nm', 'nm', diameter, '.').value).toBe(50)
  })
  it('names the limits in the unit that is shown', () => {
    expect(readQuantity('50', 'µm', 'nm', diameter, '.').problem).toBe('Allowed: 0.005 to 0.5 µm.')
    expect(readQuantity('50', 'µm', 'nm', diameter, ',').problem).toBe('Allowed: 0,005 to 0,5 µm.')
  })
  it('asks back what has two meanings, and takes it where the comma is declared', () => {
    const asked = readQuantity('1,234', '1/µm³', '1/µm³', { min: 1, max: 30_000 }, '.')
    expect(asked.value).toBeUndefined()
    expect(asked.choices?.map(one => one.value)).toEqual([1.234, 1234])
    expect(readQuantity('1,234', '1/µm³', '1/µm³', { min: 1, max: 30_000 }, ',').value).toBe(1.234)
  })
  it('wants a whole number for a count, and above its lower limit where the limit is open', () => {
    expect(readQuantity('12.5', 'count', 'count', { min: 1, max: 200, whole: true }, '.').problem).toBe('A whole number is wanted here.')
    expect(readQuantity('0', '1', '1', { min: 0, max: 1, aboveMin: true }, '.').problem).toBe('Allowed: above 0 to 1.')
  })
})

describe('steps of the arrows', () => {
  it('moves the second leading digit, ten times as far with Shift', () => {
    expect(stepped(0.3, 1, {})).toBe(0.31)
    expect(stepped(0.3, 10, {})).toBe(0.4)
    expect(stepped(0.0125, -1, {})).toBe(0.0115)
    expect(stepped(800, 1, {})).toBe(810)
  })
  it('stays inside the limits and leaves 0', () => {
    expect(stepped(0.995, 10, { max: 1 })).toBe(1)
    expect(stepped(0, 1, { min: 0, max: 1 })).toBe(0.01)
    expect(stepped(1, -10, { min: 1, whole: true })).toBe(1)
  })
})
