/** How far the run under way has come, for the border scale: 0 to 1, or null when nothing runs. A run store writes it, the frame reads it. */
export const useScaleProgress = () => useState<number | null>('scale-progress', () => null)
