/** The invented control recording of the demo bench: second response over first, isolated terminals, 200 ms steps. No real animals, cells or people. */
export interface RecordedPoint {
  /** End of the first stimulus to start of the second [ms]. */
  intervalMs: number
  /** Second response over first, mean over cells [1]. */
  ratioMean: number
  /** Standard deviation between cells [1]. */
  ratioSd: number
  /** Standard error of the mean [1]. */
  ratioSem: number
  cells: number
}

const point = (intervalMs: number, ratioMean: number, ratioSd: number, ratioSem: number, cells: number): RecordedPoint => ({ intervalMs, ratioMean, ratioSd, ratioSem, cells })

export const DEMO_RECORDING: readonly RecordedPoint[] = [
  point(50, 0.150, 0.023, 0.008, 9),
  point(100, 0.181, 0.055, 0.019, 8),
  point(200, 0.243, 0.029, 0.010, 9),
  point(400, 0.332, 0.044, 0.015, 9),
  point(800, 0.459, 0.040, 0.013, 9),
  point(1600, 0.594, 0.032, 0.011, 9),
  point(3200, 0.685, 0.037, 0.012, 9),
  point(6400, 0.745, 0.033, 0.011, 9),
  point(12_800, 0.799, 0.037, 0.013, 8),
  point(25_600, 0.890, 0.035, 0.012, 8),
  point(51_200, 0.945, 0.027, 0.009, 9),
]
