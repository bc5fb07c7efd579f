/** Householder triangularisation of small dense systems, row by row in one array. */

/**
 * Turns `matrix` into its upper triangle R in place and applies the same reflections to `right`.
 * @param matrix - rows × columns, row by row; on return R stands in its first `columns` rows, zeros below [any]
 * @param right - one value a row; on return Qᵀ·right [any]
 * @param rows - at least `columns` [1]
 * @param columns - [1]
 */
export function triangularise(matrix: Float64Array, right: Float64Array, rows: number, columns: number): void {
  for (let k = 0; k < columns; k++) {
    let scale = 0
    for (let i = k; i < rows; i++) scale = Math.max(scale, Math.abs(matrix[i * columns + k]!))
    if (scale === 0) continue
    let sum = 0
    for (let i = k; i < rows; i++) sum += (matrix[i * columns + k]! / scale) ** 2
    const pivot = matrix[k * columns + k]!, length = (pivot > 0 ? -1 : 1) * scale * Math.sqrt(sum)
    const first = pivot - length
    // v = (first, the rest of the column); the reflection is I − v·vᵀ / half, half = vᵀv / 2 = −length · first.
    const half = -length * first
    for (let j = k + 1; j < columns; j++) {
      let dot = first * matrix[k * columns + j]!
      for (let i = k + 1; i < rows; i++) dot += matrix[i * columns + k]! * matrix[i * columns + j]!
      const factor = dot / half
      matrix[k * columns + j]! -= factor * first
      for (let i = k + 1; i < rows; i++) matrix[i * columns + j]! -= factor * matrix[i * columns + k]!
    }
    let dot = first * right[k]!
    for (let i = k + 1; i < rows; i++) dot += matrix[i * columns + k]! * right[i]!
    const factor = dot / half
    right[k]! -= factor * first
    for (let i = k + 1; i < rows; i++) right[i]! -= factor * matrix[i * columns + k]!
    matrix[k * columns + k] = length
    for (let i = k + 1; i < rows; i++) matrix[i * columns + k] = 0
  }
}

/**
 * Solves R·x = right for an upper triangle; a direction that R says nothing about stays at 0.
 * @param triangle - columns × columns, row by row [any]
 * @param right - at least `columns` values [any]
 * @param columns - [1]
 * @returns x [any]
 */
export function backSubstitute(triangle: Float64Array, right: Float64Array, columns: number): Float64Array {
  const x = new Float64Array(columns)
  let largest = 0
  for (let k = 0; k < columns; k++) largest = Math.max(largest, Math.abs(triangle[k * columns + k]!))
  for (let k = columns - 1; k >= 0; k--) {
    const pivot = triangle[k * columns + k]!
    if (Math.abs(pivot) <= largest * 1e-300) continue
    let sum = right[k]!
    for (let j = k + 1; j < columns; j++) sum -= triangle[k * columns + j]! * x[j]!
    x[k] = sum / pivot
  }
  return x
}
