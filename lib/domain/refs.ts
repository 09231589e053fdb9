export interface PersonRef {
  id: number;
  name: string;
}

/** Times cross the wire as ISO 8601 UTC strings. */
export type Instant = string;
