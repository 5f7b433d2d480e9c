/**
 * cos(2 pi f) and sin(2 pi f) for |f| <= 1/2 (an angle in turns), with full relative accuracy of the sine at f -> 0.
 *
 * A table of 64 directions and a rotation by the rest |r| <= 2 pi/128: sine to r^7, 1 - cosine to r^8.
 * The angle comes and goes through a record, because a number that crosses a call may be boxed.
 */

/** Slot of the angle in turns (input). */
export const TURN = 0;
/** Slot of the cosine (output). */
export const COSINE = 1;
/** Slot of the sine (output). */
export const SINE = 2;

const DIRECTIONS = 64;
const cosines = new Float64Array(DIRECTIONS + 1);
const sines = new Float64Array(DIRECTIONS + 1);
for (let k = 0; k <= DIRECTIONS; k++) {
  const angle = ((k - DIRECTIONS / 2) * Math.PI) / (DIRECTIONS / 2);
  // The quarter turns exactly: elsewhere Math.cos(pi/2) = 6e-17 would spoil the small component.
  cosines[k] = k % 32 === 16 ? 0 : Math.cos(angle);
  sines[k] = k % 32 === 0 ? 0 : Math.sin(angle);
}

/** Reads `record[TURN]`, |turn| <= 1/2, and writes `record[COSINE]` and `record[SINE]`. */
export function cosineAndSine(record: Float64Array): void {
  const turn = record[TURN]!;
  const k = (turn * DIRECTIONS + (DIRECTIONS / 2 + 0.5)) | 0;
  const r = (turn - (k - DIRECTIONS / 2) / DIRECTIONS) * (2 * Math.PI);
  const r2 = r * r;
  const sine = r * (1 - r2 * (1 / 6 - r2 * (1 / 120 - r2 / 5040)));
  const versine = r2 * (0.5 - r2 * (1 / 24 - r2 * (1 / 720 - r2 / 40320)));
  const c = cosines[k]!;
  const s = sines[k]!;
  record[COSINE] = c - (c * versine + s * sine);
  record[SINE] = s + (c * sine - s * versine);
}
