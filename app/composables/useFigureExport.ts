/** SVG and PNG of a figure component: drawn once more at the print width in light colours, then written as a file of its own. */
import { h, render, type Component } from 'vue'
import { embeddedFaces, inlineDrawing, pixelsFor } from '~/utils/figureSvg'
import { saveFile } from '~/utils/saveFile'

/** Dots per millimetre of a PNG: 600 dots an inch. */
const DOTS_PER_MM = 600 / 25.4

export function useFigureExport() {
  const application = useNuxtApp().vueApp

  /** Draws the component off the screen in light colours, hands its SVG to `use`, takes it away again. */
  async function drawn<T>(drawing: Component, attributes: Record<string, unknown>, use: (svg: SVGSVGElement, paper: string) => T): Promise<T> {
    const place = document.createElement('div')
    place.dataset.theme = 'light'
    place.setAttribute('aria-hidden', 'true')
    place.style.cssText = 'position:absolute;left:-10000px;top:0;background:var(--card)'
    place.className = 'fig'
    document.body.append(place)
    const node = h(drawing, attributes)
    node.appContext = application._context
    try {
      render(node, place)
      await nextTick()
      const svg = place.querySelector('svg')
      if (!svg) throw new Error('The figure drew nothing.')
      return use(svg, getComputedStyle(place).backgroundColor)
    } finally {
      render(null, place)
      place.remove()
    }
  }

  const svgText = (drawing: Component, attributes: Record<string, unknown>, widthMm: number, faces = '') =>
    drawn(drawing, { ...attributes, width: pixelsFor(widthMm) }, (svg, paper) => inlineDrawing(svg, widthMm, paper, faces))

  async function saveSvg(name: string, drawing: Component, attributes: Record<string, unknown>, widthMm: number) {
    saveFile(`${name}-${widthMm}mm.svg`, await svgText(drawing, attributes, widthMm), 'image/svg+xml')
  }

  async function savePng(name: string, drawing: Component, attributes: Record<string, unknown>, widthMm: number) {
    const text = await svgText(drawing, attributes, widthMm, await embeddedFaces())
    const address = URL.createObjectURL(new Blob([text], { type: 'image/svg+xml' }))
    try {
      const image = new Image()
      image.src = address
      await image.decode()
      const canvas = document.createElement('canvas')
      canvas.width = Math.round(widthMm * DOTS_PER_MM)
      canvas.height = Math.round(canvas.width * image.naturalHeight / image.naturalWidth)
      canvas.getContext('2d')!.drawImage(image, 0, 0, canvas.width, canvas.height)
      const blob = await new Promise<Blob | null>(done => canvas.toBlob(done, 'image/png'))
      if (!blob) throw new Error('The browser made no picture.')
      saveFile(`${name}-${widthMm}mm.png`, blob, 'image/png')
    } finally {
      URL.revokeObjectURL(address)
    }
  }
  return { svgText, saveSvg, savePng }
}
