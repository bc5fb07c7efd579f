/** Which class each site of a ribbon belongs to. */

/**
 * Class of every site, in the numbering of the sites (row by row, face by face).
 * `rows`: class 0 takes the first sites; `interleaved`: site i is class 0 when floor((i+1)·n₀/S) > floor(i·n₀/S).
 * @param sitesPerClass - realised sites per class, one or two classes [count]
 * @param classLayout - how the classes are laid out
 * @returns class index per site [1]
 */
export function classesOfSites(sitesPerClass: readonly number[], classLayout: 'interleaved' | 'rows'): Uint8Array {
  const total = sitesPerClass.reduce((sum, one) => sum + one, 0), first = sitesPerClass[0] ?? 0
  const classes = new Uint8Array(total)
  for (let i = 0; i < total; i++) {
    const isFirst = classLayout === 'rows' ? i < first : Math.floor((i + 1) * first / total) > Math.floor(i * first / total)
    classes[i] = isFirst ? 0 : 1
  }
  return classes
}
