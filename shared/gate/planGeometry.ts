/** Plane geometry of a leaf that turns about the origin; numbers are lengths as floats, angles radians. Used by {@link swingEnvelope} alone. */

export type Point = readonly [number, number]
export type Segment = readonly [Point, Point]

const FULL = 2 * Math.PI

/** The four sides of a leaf in its own frame: from the hinge line to its reach, half its thickness to either face. */
export function leafSides(reach: number, half: number): Segment[] {
  const corners: Point[] = [[0, -half], [reach, -half], [reach, half], [0, half]]
  return corners.map((corner, i) => [corner, corners[(i + 1) % 4]!])
}

/** A point turned about the origin. */
export function turn([x, y]: Point, by: number): Point {
  return [x * Math.cos(by) - y * Math.sin(by), x * Math.sin(by) + y * Math.cos(by)]
}

/** Distance from a point to a segment. */
export function distanceTo([x, y]: Point, [[x1, y1], [x2, y2]]: Segment): number {
  const [dx, dy] = [x2 - x1, y2 - y1]
  const along = Math.max(0, Math.min(1, ((x - x1) * dx + (y - y1) * dy) / (dx * dx + dy * dy)))
  return Math.hypot(x - x1 - along * dx, y - y1 - along * dy)
}

/**
 * Angles at which a point on a circle round the origin can be nearest to a segment, or at a distance `offset` from it:
 * towards its ends and its normal, and where the circle meets the two lines and the two end circles that bound the strip of that offset.
 */
export function eventsOnCircle(radius: number, segment: Segment, offset: number): number[] {
  const [[x1, y1], [x2, y2]] = segment
  const length = Math.hypot(x2 - x1, y2 - y1)
  const normal = Math.atan2(x1 - x2, y2 - y1)
  // Signed distance of the segment's line from the origin along that normal.
  const away = (x1 * (y2 - y1) - y1 * (x2 - x1)) / length
  const angles = [normal, normal + Math.PI]
  for (const side of [away - offset, away + offset]) {
    if (Math.abs(side) <= radius && radius > 0) angles.push(normal + Math.acos(side / radius), normal - Math.acos(side / radius))
  }
  for (const [x, y] of segment) {
    const [far, towards] = [Math.hypot(x, y), Math.atan2(y, x)]
    angles.push(towards)
    const cosine = (radius * radius + far * far - offset * offset) / (2 * radius * far)
    if (Math.abs(cosine) <= 1) angles.push(towards + Math.acos(cosine), towards - Math.acos(cosine))
  }
  return angles
}

/** 0, `to`, and all of the angles that lie between them once whole turns are taken off; ascending. `to` is under a full turn. */
export function within(angles: readonly number[], to: number): number[] {
  const turned = angles.map(angle => ((angle % FULL) + FULL) % FULL).filter(angle => angle < to)
  return [0, ...turned, to].sort((a, b) => a - b)
}
