/** Lays the flat picture of a terminal out in pixels: a section through the ribbon, density contours, sites, vesicles of one layer. */
import { contours } from 'd3-contour'
import type { DensitySection, SceneFrame, ScenePlace } from '~~/workers/scene'

export interface SectionSite { key: number, x: number, y: number, square: boolean, filled: boolean }
export interface SectionContour { percent: number, d: string, depth: number, label: { x: number, y: number } | null }
export interface SectionLayout {
  width: number
  height: number
  /** Pixels of one voxel. */
  scale: number
  plate: { x: number, y: number, width: number, height: number }
  contours: SectionContour[]
  vesicles: { key: string, x: number, y: number }[]
  sites: SectionSite[]
  bar: { width: number, text: string }
}

/** Far vesicles are left out: around the ribbon this much is shown [µm]. */
const AROUND_UM = 0.35
const LEVELS = [98, 95, 90, 80, 65, 50] as const

interface View { left: number, right: number, bottom: number, top: number, scale: number, offsetX: number, offsetY: number }
function viewOf(place: ScenePlace, width: number, height: number): View {
  const [nx, , nz] = place.size
  const xs = Array.from({ length: place.siteSides.length }, (_, i) => place.sites[3 * i]!)
  const zs = Array.from({ length: place.siteSides.length }, (_, i) => place.sites[3 * i + 2]!)
  const around = AROUND_UM * 1000 / place.spacingNm
  const left = Math.max(0, Math.min(...xs) - around)
  const right = Math.min(nx, Math.max(...xs) + 1 + around)
  const bottom = place.plateLayer < 0 ? -0.8 : Math.max(0, Math.min(...zs) - around)
  const top = Math.min(nz, Math.max(...zs) + 1 + around)
  const scale = Math.min(width / (right - left), height / (top - bottom))
  return { left, right, bottom, top, scale, offsetX: (width - scale * (right - left)) / 2, offsetY: (height - scale * (top - bottom)) / 2 }
}

/** Values without gaps: inside the plate the mean of the two faces stands, so that contours run through and not around it. */
function withoutGaps({ values, width, height }: DensitySection): number[] {
  return Array.from(values, (value, i) => {
    if (!Number.isNaN(value)) return value
    const z = Math.floor(i / width)
    const near = [z > 0 ? values[i - width]! : Number.NaN, z < height - 1 ? values[i + width]! : Number.NaN].filter(one => !Number.isNaN(one))
    return near.length > 0 ? near.reduce((sum, one) => sum + one, 0) / near.length : 1
  })
}

function contoursOf(section: DensitySection, x: (at: number) => number, y: (at: number) => number, inside: (px: number, py: number) => boolean): SectionContour[] {
  const values = withoutGaps(section)
  const least = Math.min(...values) * 100
  const rings = contours().size([section.width, section.height]).smooth(true)
  return LEVELS.filter(percent => percent > least).map((percent, i) => {
    // The region at or below a level is the region at or above its negative.
    const shape = rings.contour(values.map(value => -value), -percent / 100)
    const outlines = shape.coordinates.flatMap(polygon => polygon)
    const d = outlines.map(ring => `M${ring.map(([px, pz]) => `${x(px!).toFixed(1)} ${y(pz!).toFixed(1)}`).join('L')}Z`).join('')
    const points = outlines.flat().map(([px, pz]) => ({ x: x(px!), y: y(pz!) })).filter(point => inside(point.x, point.y))
    const label = points.reduce<{ x: number, y: number } | null>((best, point) => !best || point.x + point.y * -1.2 > best.x + best.y * -1.2 ? point : best, null)
    return { percent, d, depth: Math.min(5, i + 1), label }
  })
}

function barOf(scale: number, spacingNm: number): SectionLayout['bar'] {
  const pxPerUm = scale * 1000 / spacingNm
  const lengthUm = [5, 2, 1, 0.5, 0.2, 0.1, 0.05, 0.02].find(length => length * pxPerUm <= 110) ?? 0.02
  return { width: lengthUm * pxPerUm, text: lengthUm >= 0.1 ? `${lengthUm} µm` : `${lengthUm * 1000} nm` }
}

/** The picture for a width [px]; without a density the contours are left out. */
export function laySection(place: ScenePlace, frame: SceneFrame, section: DensitySection | null, row: number, width: number): SectionLayout {
  const height = Math.round(Math.min(width * 0.75, 340))
  const view = viewOf(place, width, height)
  const { scale } = view
  const x = (at: number) => view.offsetX + (at - view.left) * scale
  const y = (at: number) => height - view.offsetY - (at - view.bottom) * scale
  const inside = (px: number, py: number) => px > 10 && px < width - 24 && py > 16 && py < height - 10
  const sites: SectionSite[] = []
  let first = Infinity
  let last = -Infinity
  for (let i = 0; i < place.siteSides.length; i++) {
    if (place.sites[3 * i + 1] !== row) continue
    const column = place.sites[3 * i]!
    first = Math.min(first, column)
    last = Math.max(last, column + 1)
    sites.push({ key: i, x: x(column + 0.5), y: y(place.sites[3 * i + 2]! + 0.5 + place.siteSides[i]! * 0.12), square: place.classOfSite[i] === 1, filled: frame.sites[i]! > 0 })
  }
  const vesicles: SectionLayout['vesicles'] = []
  for (let k = 0; k < frame.vesicles.length; k += 3) {
    if (frame.vesicles[k + 1] !== row) continue
    const at = { x: x(frame.vesicles[k]! + 0.5), y: y(frame.vesicles[k + 2]! + 0.5) }
    if (at.x > -scale && at.x < width + scale && at.y > -scale && at.y < height + scale) vesicles.push({ key: `${k}`, ...at })
  }
  const layer = place.plateLayer
  const plate = layer < 0
    ? { x: 0, y: y(0), width, height: height - y(0) }
    : { x: x(first), y: y(layer + 0.82), width: (last - first) * scale, height: 0.64 * scale }
  return { width, height, scale, plate, contours: section ? contoursOf(section, x, y, inside) : [], vesicles, sites, bar: barOf(scale, place.spacingNm) }
}

/** The picture in a sentence. */
export function sectionSentence(place: ScenePlace, frame: SceneFrame, section: DensitySection | null): string {
  const filled = frame.sites.reduce((count, state) => count + (state > 0 ? 1 : 0), 0)
  const least = section ? Math.min(...withoutGaps(section)) : null
  const density = least === null ? '' : ` Mean vesicle density next to the ribbon is ${Math.round(least * 100)} % of rest.`
  return `Section through the ribbon ${Number(frame.timeS.toPrecision(2))} s after the stimulus in one replicate: ${filled} of ${frame.sites.length} sites filled.${density}`
}

/** Density over rest going out from the ribbon's middle, for the table [nm, %]. */
export function densityProfile(place: ScenePlace, section: DensitySection): string[][] {
  const column = Math.floor(section.width / 2)
  const start = place.plateLayer < 0 ? 0 : place.plateLayer + 1
  return Array.from({ length: section.height - start }, (_, i) => [String(Math.round((i + 0.5) * place.spacingNm)), (section.values[(start + i) * section.width + column]! * 100).toFixed(1)])
}
