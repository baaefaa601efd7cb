/** Bounding boxes of lines in the order they follow one another, and of pairs, fours, … of them: a tree in one array. */
export interface BoxTree {
  count: number
  /** Leaves a level, as a power of two. */
  leaves: number
  /** Four numbers a node: west, south, east, north. Node 1 is the root, the children of n are 2n and 2n + 1. */
  boxes: Float64Array
}

/** Lines are given as x0, y0, x1, y1. Neighbours in the list should be neighbours on the map. */
export function boxTreeOf(lines: Float64Array): BoxTree {
  const count = lines.length / 4
  const leaves = 2 ** Math.ceil(Math.log2(Math.max(1, count)))
  const boxes = new Float64Array(8 * leaves)
  for (let k = 0; k < leaves; k++) {
    const at = 4 * (leaves + k)
    const from = 4 * k
    const there = k < count
    boxes[at] = there ? Math.min(lines[from]!, lines[from + 2]!) : Infinity
    boxes[at + 1] = there ? Math.min(lines[from + 1]!, lines[from + 3]!) : Infinity
    boxes[at + 2] = there ? Math.max(lines[from]!, lines[from + 2]!) : -Infinity
    boxes[at + 3] = there ? Math.max(lines[from + 1]!, lines[from + 3]!) : -Infinity
  }
  for (let node = leaves - 1; node >= 1; node--) {
    for (let side = 0; side < 4; side++) {
      const merge = side < 2 ? Math.min : Math.max
      boxes[4 * node + side] = merge(boxes[8 * node + side]!, boxes[8 * node + 4 + side]!)
    }
  }
  return { count, leaves, boxes }
}

/**
 * Calls `visit(i, j)` for every two lines, i < j, whose boxes meet when j is moved `shift` degrees east; for a shift other than 0
 * also i ≥ j. Stops when `visit` returns false, and then returns false.
 */
export function forMeetingPairs(tree: BoxTree, shift: number, visit: (i: number, j: number) => boolean): boolean {
  const { boxes, leaves, count } = tree
  const stack = [1, 1]
  while (stack.length > 0) {
    const b = stack.pop()!
    const a = stack.pop()!
    if (boxes[4 * a]! > boxes[4 * b + 2]! + shift || boxes[4 * b]! + shift > boxes[4 * a + 2]!
      || boxes[4 * a + 1]! > boxes[4 * b + 3]! || boxes[4 * b + 1]! > boxes[4 * a + 3]!) continue
    if (a >= leaves) {
      const i = a - leaves
      const j = b - leaves
      if (i >= count || j >= count || (shift === 0 && i >= j)) continue
      if (!visit(i, j)) return false
      continue
    }
    stack.push(2 * a, 2 * b, 2 * a, 2 * b + 1, 2 * a + 1, 2 * b + 1)
    if (shift !== 0 || a !== b) stack.push(2 * a + 1, 2 * b)
  }
  return true
}
