/** A reader of one format: lines are pushed in, storms are given to the `emit` that it was made with. */
export interface TrackParser {
  /**
   * @param text one line without its end
   * @param line its 1-based number
   */
  line(text: string, line: number): void;
  /** The source is at its end: gives out what is still held. */
  end(): void;
}
