/** What a run is asked for, in SI. */
export interface RunSettings {
  readonly until: number; // s
  /** The run also ends at the vanishing that leaves this many bubbles; null: it does not. */
  readonly untilBubbles: number | null;
  /** Frames from the start to `until`, evenly spaced, the start itself not counted; 0: none at all. */
  readonly frames: number;
  readonly tolerance: number;
  readonly method: 'auto' | 'explicit' | 'stiff';
  readonly vanishRadius: number; // m
  readonly onVanish: 'drop' | 'join-neighbours';
}
