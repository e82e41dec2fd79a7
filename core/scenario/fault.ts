/**
 * What is wrong with a scenario file, as plain data. Made in this room, made text only at the edge of the program.
 */

export interface Fault {
  /** Where, such as `nodes[3].radius`; '' for the file as a whole. */
  readonly path: string;
  /** A short fixed word for scripts, such as `dimension` or `unknown-key`. */
  readonly code: string;
  /** A sentence without the path: what is there, what is needed, what to do. */
  readonly message: string;
  /** What stands there, as JSON text, shortened; null where nothing does. */
  readonly actual: string | null;
  /** What is needed, in words; '' where that cannot be said shortly. */
  readonly expected: string;
  readonly severity: 'error' | 'warning';
}
