/** Alias cells (Walker 1977, Vose 1991) over the first-touch table: {threshold u32, other cell u32}. Two draws: cell, then threshold. */

/** Sum of the table in order, in f64. */
export function sumOfTable(table: usize, count: i32): f64 {
  let sum: f64 = 0
  for (let i = 0; i < count; i++) sum += <f64>load<f32>(table + (<usize>i << 2))
  return sum
}

/** Fills cells[count] from the table's weights. */
export function fillAlias(table: usize, count: i32, sum: f64, cells: usize): void {
  const weights = heap.alloc(<usize>count << 3), order = heap.alloc(<usize>count << 2)
  let small = 0, large = count
  for (let i = 0; i < count; i++) {
    const weight = <f64>load<f32>(table + (<usize>i << 2)) * count / sum
    store<f64>(weights + (<usize>i << 3), weight)
    store<i32>(order + (<usize>(weight < 1 ? small++ : --large) << 2), i)
  }
  // order[0, small) is a stack of light cells, order[large, count) one of heavy cells with its top at `large`.
  while (small > 0 && large < count) {
    const light = load<i32>(order + (<usize>(small - 1) << 2)), heavy = load<i32>(order + (<usize>large << 2))
    const own = load<f64>(weights + (<usize>light << 3)), left = load<f64>(weights + (<usize>heavy << 3)) - (1 - own)
    store<u32>(cells + (<usize>light << 3), <u32>(own * 4294967296))
    store<u32>(cells + (<usize>light << 3), heavy, 4)
    store<f64>(weights + (<usize>heavy << 3), left)
    if (left < 1) {
      store<i32>(order + (<usize>(small - 1) << 2), heavy)
      large++
    }
    else small--
  }
  // What rounding leaves over has weight 1.
  for (let i = 0; i < small; i++) certain(cells, load<i32>(order + (<usize>i << 2)))
  for (let i = large; i < count; i++) certain(cells, load<i32>(order + (<usize>i << 2)))
  heap.free(weights)
  heap.free(order)
}

function certain(cells: usize, cell: i32): void {
  store<u32>(cells + (<usize>cell << 3), u32.MAX_VALUE)
  store<i32>(cells + (<usize>cell << 3), cell, 4)
}
