/** Lays the plan of a ribbon out in pixels: faces, sites by class, a scale in nanometres. */
import { realisedCounts } from '#shared/kinetics/realised-counts'
import { classesOfSites } from '#shared/walk/layout'
import type { Scenario } from '#shared/schemas/scenario'

export interface PictureSite { key: number, x: number, y: number, first: boolean }
export interface PictureFace { name: string, x: number, y: number, width: number, height: number, sites: PictureSite[], widthLabel: string, heightLabel: string }
export interface RibbonLayout {
  width: number
  height: number
  pitch: number
  faces: PictureFace[]
  legend: { x: number, y: number, entries: { name: string, count: number, first: boolean }[], remarks: string[] }
  shownRows: number
  shownColumns: number
  /** Whether only a part of each face is drawn. */
  partial: boolean
  sitesPerClass: number[]
}

/** More rows or columns than these are cut: sites below 8 px cannot be told apart. */
const MOST_ROWS = 20
const PITCH_PX = 27
const LEFT = 46

const length = (count: number, spacingNm: number) => {
  const nm = count * spacingNm
  return nm >= 1000 ? `${Number((nm / 1000).toPrecision(3))} µm` : `${Number(nm.toPrecision(4))} nm`
}

function remarksOf(scenario: Scenario, sitesPerClass: number[], total: number): string[] {
  const share = scenario.sites[0]!.share
  const exact = share * total
  if (scenario.sites.length < 2 || Math.abs(exact - sitesPerClass[0]!) < 1e-9) return []
  return [`${share} of ${total} sites is ${Number(exact.toPrecision(4))};`, `${sitesPerClass[0]} are drawn and used`]
}

/** The plan of every face for a width [px]; faces stand side by side where they fit, else one below the other. */
export function layRibbon(scenario: Pick<Scenario, 'ribbon' | 'sites' | 'medium'>, widthPx: number): RibbonLayout {
  const { ribbon, medium } = scenario
  const plate = ribbon.shape === 'plate' ? ribbon : { rows: 1, columns: 1, faces: 1 as const, classLayout: 'rows' as const }
  const total = plate.rows * plate.columns * plate.faces
  const sitesPerClass = realisedCounts(scenario.sites.map(site => site.share), total)
  const classes = classesOfSites(sitesPerClass, plate.classLayout)
  const narrow = widthPx < 560
  const shownRows = Math.min(plate.rows, MOST_ROWS)
  const roomFor = (faces: number) => (widthPx - LEFT - 20 - (narrow ? 0 : 190) - (faces - 1) * 64) / faces
  const beside = plate.faces === 2 && roomFor(2) / Math.min(plate.columns, 40) >= 14
  const room = roomFor(beside ? 2 : 1)
  const pitch = Math.max(8, Math.min(PITCH_PX, Math.floor(room / plate.columns)))
  const shownColumns = Math.min(plate.columns, Math.max(1, Math.floor(room / pitch)))
  const faceWidth = shownColumns * pitch
  const faceHeight = shownRows * pitch
  const faces = Array.from({ length: plate.faces }, (_, face): PictureFace => {
    const x = LEFT + (beside ? face * (faceWidth + 64) : 0)
    const y = 26 + (beside ? 0 : face * (faceHeight + 58))
    const sites = Array.from({ length: shownRows * shownColumns }, (_, k) => {
      const row = Math.floor(k / shownColumns)
      const column = k % shownColumns
      const key = face * plate.rows * plate.columns + row * plate.columns + column
      return { key, x: x + (column + 0.5) * pitch, y: y + (row + 0.5) * pitch, first: classes[key] === 0 }
    })
    return { name: plate.faces === 2 ? `Face ${face + 1}` : ribbon.shape === 'isolated' ? 'One site in a wide wall' : 'On a wall', x, y, width: faceWidth, height: faceHeight, sites, widthLabel: length(shownColumns, medium.spacingNm), heightLabel: length(shownRows, medium.spacingNm) }
  })
  const entries = scenario.sites.map((site, i) => ({ name: site.name, count: sitesPerClass[i]!, first: i === 0 }))
  const partial = shownRows < plate.rows || shownColumns < plate.columns
  const remarks = [...remarksOf(scenario as Scenario, sitesPerClass, total), ...(partial ? [`the first ${shownRows} × ${shownColumns} of ${plate.rows} × ${plate.columns}`, 'a face are drawn'] : [])]
  const last = faces.at(-1)!
  const legend = narrow
    ? { x: LEFT, y: last.y + last.height + 48, entries, remarks }
    : { x: last.x + last.width + 40, y: 46, entries, remarks }
  const legendHeight = entries.length * 24 + remarks.length * 16
  const height = Math.max(last.y + last.height + 28, legend.y + legendHeight + 4)
  return { width: widthPx, height, pitch, faces, legend, shownRows, shownColumns, partial, sitesPerClass }
}

/** The picture in a sentence. */
export function ribbonSentence(scenario: Pick<Scenario, 'ribbon' | 'sites' | 'medium'>, layout: RibbonLayout): string {
  const { ribbon } = scenario
  const kinds = layout.legend.entries.map(entry => `${entry.count} ${entry.name}`).join(' and ')
  if (ribbon.shape === 'isolated') return `One ${scenario.sites[0]!.name} site in the middle of a wide wall.`
  const where = ribbon.faces === 2 ? 'on each of two faces of a free plate' : 'on a wall'
  return `Plan of the ribbon: ${ribbon.rows} rows of ${ribbon.columns} sites ${where}, ${kinds} sites, laid out ${ribbon.classLayout === 'rows' ? 'in rows' : 'interleaved'}.`
}
