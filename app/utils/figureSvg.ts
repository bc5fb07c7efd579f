/** A drawing as a file of its own: computed light colours written in, text left as text, no reference outside. */

/** Millimetres of one CSS pixel in an exported figure: 12.5 px of text become 8 pt. */
const MM_PER_PX = 8 * 25.4 / 72 / 12.5
export const FIGURE_WIDTHS_MM = [85, 174] as const
/** Width to draw at [px] so that the file is as wide as asked [mm] with 8 pt text. */
export const pixelsFor = (widthMm: number) => Math.round(widthMm / MM_PER_PX)

const FAMILY = '\'Source Sans 3\', \'Noto Sans\', \'DejaVu Sans\', Arial, sans-serif'
/** Presentation properties that carry a drawing; `none` and defaults are left out. */
const KEPT: readonly (readonly [string, string])[] = [
  ['fill', 'rgb(0, 0, 0)'], ['fill-opacity', '1'], ['stroke', 'none'], ['stroke-width', '1px'], ['stroke-opacity', '1'], ['stroke-dasharray', 'none'],
  ['stroke-linejoin', 'miter'], ['paint-order', 'normal'], ['font-weight', '400'], ['font-style', 'normal'], ['text-anchor', 'start'],
]

/** Writes the computed look of a drawing that stands in the document into a copy of it. */
export function inlineDrawing(drawing: SVGSVGElement, widthMm: number, paper: string, fontFaces = ''): string {
  const copy = drawing.cloneNode(true) as SVGSVGElement
  const from = [drawing, ...drawing.querySelectorAll<SVGElement>('*')]
  const to = [copy, ...copy.querySelectorAll<SVGElement>('*')]
  from.forEach((element, i) => {
    const look = getComputedStyle(element)
    const target = to[i]!
    target.removeAttribute('class')
    target.removeAttribute('style')
    for (const name of target.getAttributeNames()) if (name.startsWith('data-')) target.removeAttribute(name)
    if (element === drawing || element instanceof SVGGElement) return
    for (const [property, usual] of KEPT) {
      const value = look.getPropertyValue(property)
      if (value && value !== usual) target.setAttribute(property, value)
    }
  })
  const box = drawing.viewBox.baseVal
  copy.setAttribute('xmlns', 'http://www.w3.org/2000/svg')
  copy.setAttribute('width', `${widthMm}mm`)
  copy.setAttribute('height', `${(widthMm * box.height / box.width).toFixed(2)}mm`)
  copy.setAttribute('font-family', FAMILY)
  copy.setAttribute('font-size', '12.5')
  const ground = document.createElementNS('http://www.w3.org/2000/svg', 'rect')
  ground.setAttribute('width', String(box.width))
  ground.setAttribute('height', String(box.height))
  ground.setAttribute('fill', paper)
  copy.prepend(ground)
  const title = document.createElementNS('http://www.w3.org/2000/svg', 'title')
  title.textContent = drawing.getAttribute('aria-label') ?? ''
  copy.prepend(title)
  if (fontFaces) {
    const style = document.createElementNS('http://www.w3.org/2000/svg', 'style')
    style.textContent = fontFaces
    copy.prepend(style)
  }
  return `<?xml version="1.0" encoding="UTF-8"?>\n${new XMLSerializer().serializeToString(copy)}\n`
}

/** The faces of the page's own type as data addresses: a picture drawn from an SVG reaches no file. */
export async function embeddedFaces(): Promise<string> {
  const rules = [...document.styleSheets].flatMap((sheet) => {
    try {
      return [...sheet.cssRules]
    } catch {
      return []
    }
  })
  const faces = rules.filter((rule): rule is CSSFontFaceRule => rule instanceof CSSFontFaceRule && rule.style.getPropertyValue('font-family').includes('Source Sans 3'))
  const written = await Promise.all(faces.map(async (face) => {
    const address = /url\("?([^")]+\.woff2)"?\)/.exec(face.style.getPropertyValue('src'))?.[1]
    if (!address) return ''
    const base = face.parentStyleSheet?.href ?? location.href
    const bytes = new Uint8Array(await (await fetch(new URL(address, base))).arrayBuffer())
    let text = ''
    for (const byte of bytes) text += String.fromCharCode(byte)
    const style = face.style
    const range = style.getPropertyValue('unicode-range')
    return `@font-face{font-family:"Source Sans 3";font-weight:${style.getPropertyValue('font-weight') || 400};font-style:${style.getPropertyValue('font-style') || 'normal'};src:url(data:font/woff2;base64,${btoa(text)}) format("woff2");${range ? `unicode-range:${range}` : ''}}`
  }))
  return written.join('')
}
