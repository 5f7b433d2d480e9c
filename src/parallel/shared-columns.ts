/**
 * Memory that the calling thread shares with the others, kept from one batch to the next.
 *
 * The system hands out new memory page by page as it is first written: for large batches that may take most of what a
 * second thread gains.
 */

/** A column of a batch. */
type Column = Float64Array | Uint8Array;

/** The shared columns of one batch. */
export interface SharedColumns {
  /**
   * The first `rows` numbers of a column as a column that threads share: itself where it is one, else a copy, with values
   * where they matter (others are whatever the memory held).
   */
  share<Given extends Column>(column: Given, rows: number, filled: boolean): Given;
  /** Leaves the memory to the next batch. Only when no thread writes to it any more. */
  release(): void;
}

/** Memory for batches, as many at a time as there are; what the last one used is kept, the rest is left to the collector. */
export interface SharedMemory {
  open(): SharedColumns;
  /** Keeps nothing any more. */
  close(): void;
}

/** A kept piece is taken where it is long enough, but not for a column so short that most of it would lie idle. */
const longest = 4;

/** No memory yet. */
export function sharedMemory(): SharedMemory {
  let kept: SharedArrayBuffer[] = [];
  let closed = false;

  function take(bytes: number): SharedArrayBuffer {
    const place = kept.findIndex(({ byteLength }) => byteLength >= bytes && byteLength <= longest * bytes);
    return place < 0 ? new SharedArrayBuffer(bytes) : kept.splice(place, 1)[0]!;
  }

  function open(): SharedColumns {
    const taken: SharedArrayBuffer[] = [];

    function share<Given extends Column>(column: Given, rows: number, filled: boolean): Given {
      if (column.buffer instanceof SharedArrayBuffer) return column;
      const buffer = take(rows * column.BYTES_PER_ELEMENT);
      taken.push(buffer);
      const copy = column instanceof Uint8Array ? new Uint8Array(buffer, 0, rows) : new Float64Array(buffer, 0, rows);
      if (filled) copy.set(column.subarray(0, rows));
      return copy as Given;
    }

    function release(): void {
      if (taken.length > 0 && !closed) kept = taken;
    }

    return { share, release };
  }

  return {
    open,
    close: () => {
      kept = [];
      closed = true;
    },
  };
}
