/** Volume and face area of a bubble of given size: radius of a free sphere, height of a mounted cap (physics.md section 2). */

/** m^3; `mouth` is the mouth's radius, 0 for a free sphere. */
export function bubbleVolume(mouth: number, size: number): number {
  return mouth > 0 ? (Math.PI * size * (3 * mouth * mouth + size * size)) / 6 : (4 / 3) * Math.PI * size ** 3;
}

/** Area of one face, m^2. */
export function faceArea(mouth: number, size: number): number {
  return mouth > 0 ? Math.PI * (mouth * mouth + size * size) : 4 * Math.PI * size * size;
}

/** Height of the larger of the two caps that have radius of curvature R on a mouth of radius a, m; R >= a. */
export function capHeight(mouth: number, radius: number): number {
  return radius + Math.sqrt(radius * radius - mouth * mouth);
}
