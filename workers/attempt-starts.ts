/** Classes of starts that mirror into each other, and the sites around each class in order of distance. */
import { coordinatesOf, mirrorAxes, mirrored, type RibbonBox } from './attempt-boxes'

/** Starts of a ribbon: sites stand for the voxels in front of them. */
export interface Starts {
  count: number
  /** One site per class, whose laws are solved. */
  representatives: number[]
  classOf: Uint16Array
  /** The mirror (bits of axes) that takes a site's representative to it. */
  mirrorOf: Uint8Array
  /** [mirror][site] image of a site. */
  mirrors: Uint16Array
  /** [class][8] and [class]. */
  members: Uint16Array
  memberCounts: Uint16Array
}

function imagesOf(box: RibbonBox, axes: number): Uint16Array {
  const siteAt = new Map(box.fronts.map((front, site) => [front, site])), count = box.fronts.length
  const images = new Uint16Array(8 * count)
  for (let mirror = 0; mirror < 8; mirror++)
    for (let site = 0; site < count; site++)
      images[mirror * count + site] = (mirror & ~axes) === 0 ? siteAt.get(mirrored(box.size, box.fronts[site]!, mirror))! : site
  return images
}

/** Sorts a ribbon's sites into classes. */
export function startsOf(box: RibbonBox): Starts {
  const axes = mirrorAxes(box), count = box.fronts.length, mirrors = imagesOf(box, axes)
  const classOf = new Uint16Array(count).fill(0xFFFF), mirrorOf = new Uint8Array(count), representatives: number[] = [], members: number[][] = []
  for (let site = 0; site < count; site++) {
    if (classOf[site] !== 0xFFFF) continue
    members.push([])
    for (let mirror = 0; mirror < 8; mirror++) {
      const image = mirrors[mirror * count + site]!
      if ((mirror & ~axes) !== 0 || classOf[image] !== 0xFFFF) continue
      classOf[image] = representatives.length
      mirrorOf[image] = mirror
      members[representatives.length]!.push(image)
    }
    representatives.push(site)
  }
  return {
    count: representatives.length, representatives, classOf, mirrorOf, mirrors,
    members: Uint16Array.from(members.flatMap(sites => Array.from({ length: 8 }, (_, i) => sites[i] ?? 0))),
    memberCounts: Uint16Array.from(members, sites => sites.length),
  }
}

/** Sites in order of distance (hops) from one, ties by number. */
export function orderFrom(box: RibbonBox, site: number): number[] {
  const here = coordinatesOf(box.size, box.fronts[site]!)
  const distance = box.fronts.map((front) => {
    const at = coordinatesOf(box.size, front)
    return Math.abs(at[0] - here[0]) + Math.abs(at[1] - here[1]) + Math.abs(at[2] - here[2])
  })
  return box.fronts.map((_, other) => other).sort((a, b) => distance[a]! - distance[b]! || a - b)
}

/** A representative whose law in the near box is the mirror image of an earlier one's: that class, and the mirror that leads from it. */
export interface Likeness { of: number, mirror: number }

/** For each class the earlier class that it mirrors in the near box (which may have more mirror planes than the terminal), or null. */
export function likenesses(near: RibbonBox, starts: Starts): { alike: (Likeness | null)[], images: Uint16Array } {
  const axes = mirrorAxes(near), images = imagesOf(near, axes), count = near.fronts.length
  const known = new Map<number, Likeness>()
  const alike = starts.representatives.map((site, kind) => {
    const found = known.get(site)
    if (found) return found
    for (let mirror = 0; mirror < 8; mirror++)
      if ((mirror & ~axes) === 0) known.set(images[mirror * count + site]!, { of: kind, mirror })
    return null
  })
  return { alike, images }
}
