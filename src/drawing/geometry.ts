/** Millimetres. On sheets and in symbols x runs right and y runs down. */
export type Mm = number;

export interface Point {
  x: Mm;
  y: Mm;
}

export interface Box {
  x: Mm;
  y: Mm;
  width: Mm;
  height: Mm;
}

export interface Size {
  width: Mm;
  height: Mm;
}
