/** Memory of batches: what is kept, what is not, and that nothing of one batch shows in the next. */
import { expect, test } from "vitest";
import { sharedMemory } from "../../src/parallel/shared-columns.js";

test("the next batch of about that size takes the same memory, also while columns differ in type and length", () => {
  const memory = sharedMemory();
  const first = memory.open();
  const density = first.share(Float64Array.of(1, 2, 3, 4), 3, true);
  const refused = first.share(new Uint8Array(3), 3, true);
  expect([...density]).toEqual([1, 2, 3]);
  first.release();

  const second = memory.open();
  const next = second.share(Float64Array.of(5, 6), 2, true);
  expect([...next]).toEqual([5, 6]);
  expect(next.buffer).toBe(density.buffer);
  expect(second.share(new Uint8Array(2), 2, false).buffer).toBe(refused.buffer);
});

test("two batches at once have memory of their own", () => {
  const memory = sharedMemory();
  const [one, other] = [memory.open(), memory.open()];
  const column = new Float64Array(8);
  const first = one.share(column, 8, true);
  expect(other.share(column, 8, true).buffer).not.toBe(first.buffer);
  one.release();
  expect(other.share(column, 8, true).buffer).toBe(first.buffer);
});

test("a small batch does not hold on to the memory of a large one, and a closed evaluator to none", () => {
  const memory = sharedMemory();
  const large = memory.open();
  const first = large.share(new Float64Array(1000), 1000, false);
  large.release();
  const small = memory.open();
  const second = small.share(new Float64Array(10), 10, false);
  expect(second.buffer.byteLength).toBe(80);
  small.release();
  const again = memory.open();
  expect(again.share(new Float64Array(1000), 1000, false).buffer).not.toBe(first.buffer);
  again.release();
  memory.close();
  const late = memory.open();
  const last = late.share(new Float64Array(1000), 1000, false);
  late.release();
  expect(memory.open().share(new Float64Array(1000), 1000, false).buffer).not.toBe(last.buffer);
});

test("a column that is shared already is taken as it is", () => {
  const column = new Float64Array(new SharedArrayBuffer(80), 8, 4);
  const batch = sharedMemory().open();
  expect(batch.share(column, 2, true)).toBe(column);
});
