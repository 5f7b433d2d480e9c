/**
 * NumPy's binary forms: bytes made by hand from the published descriptions (NEP 1, `numpy.lib.format`; PKWARE APPNOTE 4.3),
 * NumPy itself where python3 has it, and files that are not what they claim.
 */
import { spawnSync } from "node:child_process";
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { crc32 as nodeCrc32 } from "node:zlib";
import fc from "fast-check";
import { composition, isFermistateError, whiteDwarfMatter } from "fermistate";
import {
  arrayFromNpy,
  arraysFromNpz,
  arraysToNpz,
  arrayToNpy,
  grid,
  gridToNpz,
  type NumberArray,
} from "fermistate/grids";
import { afterAll, describe, expect, test } from "vitest";
import { crc32 } from "../../src/grids/bytes.js";

const text = (words: string): Uint8Array => Uint8Array.from(words, (one) => one.charCodeAt(0));
const joined = (...parts: readonly (Uint8Array | readonly number[])[]): Uint8Array =>
  new Uint8Array(Buffer.concat(parts.map((part) => Uint8Array.from(part))));
const little = (value: number, bytes: number): number[] =>
  Array.from({ length: bytes }, (_, i) => Math.floor(value / 256 ** i) % 256);

/** An .npy file of version 1.0 with any header. */
const npy = (header: string, data: Uint8Array | readonly number[], version = [1, 0]): Uint8Array => {
  const length = little(header.length, version[0] === 1 ? 2 : 4);
  return joined(text("\x93NUMPY"), version, length, text(header), data);
};
const header = (descr: string, order: string, shape: string): string =>
  `{'descr': '${descr}', 'fortran_order': ${order}, 'shape': ${shape}, }\n`;
/** 1.5 in IEEE 754: sign 0, exponent 1023, fraction 0.5. */
const oneAndAHalf = [0, 0, 0, 0, 0, 0, 0xf8, 0x3f];

const codeOf = (action: () => unknown): string | undefined => {
  try {
    action();
    return undefined;
  } catch (error) {
    if (!isFermistateError(error)) throw error;
    return error.code;
  }
};

const array: NumberArray = { shape: [2, 3], values: Float64Array.of(1, -0, Number.NaN, 1e-310, Infinity, 6.25) };

test("the check sum is that of the ZIP specification", () => {
  expect(crc32(text("123456789"))).toBe(0xcbf43926); // the published check value of CRC-32
  // Node's own zlib where this Node has it (20.15 on).
  const bytes = Uint8Array.from({ length: 1000 }, (_, i) => (i * i) % 251);
  if (typeof nodeCrc32 === "function") expect(crc32(bytes)).toBe(nodeCrc32(bytes));
});

describe(".npy against bytes made by hand", () => {
  test("what is written has version 1.0, a padded header of the documented form, and little-endian doubles", () => {
    const bytes = arrayToNpy({ shape: [1], values: Float64Array.of(1.5) });
    expect([...bytes.subarray(0, 10)]).toEqual([0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59, 1, 0, 118, 0]);
    const words = "{'descr': '<f8', 'fortran_order': False, 'shape': (1,), }".padEnd(117);
    expect(bytes).toEqual(joined(bytes.subarray(0, 10), text(`${words}\n`), oneAndAHalf));
    expect((bytes.length - 8) % 64).toBe(0);
  });

  test.each<[string, Uint8Array, number[], number[]]>([
    ["doubles", npy(header("<f8", "False", "(1,)"), oneAndAHalf), [1], [1.5]],
    ["big-endian doubles", npy(header(">f8", "False", "(1,)"), [...oneAndAHalf].reverse()), [1], [1.5]],
    ["floats", npy(header("<f4", "False", "(2,)"), [0, 0, 0xc0, 0x3f, 0, 0, 0x80, 0xbf]), [2], [1.5, -1]],
    ["version 2.0", npy(header("<f8", "False", "(1,)"), oneAndAHalf, [2, 0]), [1], [1.5]],
    ["version 3.0", npy(header("<f8", "False", "(1,)"), oneAndAHalf, [3, 0]), [1], [1.5]],
    ["a single number", npy(header("<f8", "False", "()"), oneAndAHalf), [], [1.5]],
    ["no number", npy(header("<f8", "False", "(3, 0)"), []), [3, 0], []],
    ["keys in another order", npy(`{"shape":(1,),"descr":"<f8","fortran_order":False}`, oneAndAHalf), [1], [1.5]],
  ])("reads %s", (_, bytes, shape, values) => {
    expect(arrayFromNpy(bytes)).toEqual({ shape, values: Float64Array.from(values) });
  });

  test("Fortran order is given back in C order", () => {
    const numbers = new Uint8Array(Float64Array.of(1, 4, 2, 5, 3, 6).buffer);
    const read = arrayFromNpy(npy(header("<f8", "True", "(2, 3)"), numbers));
    expect([...read.values]).toEqual([1, 2, 3, 4, 5, 6]);
  });

  test.each<[string, Uint8Array]>([
    ["nothing", new Uint8Array(0)],
    ["another beginning", npy(header("<f8", "False", "(1,)"), oneAndAHalf).fill(0, 0, 1)],
    ["version 4.0", npy(header("<f8", "False", "(1,)"), oneAndAHalf, [4, 0])],
    ["version 1.7", npy(header("<f8", "False", "(1,)"), oneAndAHalf, [1, 7])],
    ["a number too few", npy(header("<f8", "False", "(2,)"), oneAndAHalf)],
    ["a byte too many", npy(header("<f8", "False", "(1,)"), [...oneAndAHalf, 0])],
    ["a shape beyond all memory", npy(header("<f8", "False", "(9007199254740991, 9007199254740991)"), oneAndAHalf)],
    ["a shape of infinite and no numbers", npy(header("<f8", "False", `(${"9007199254740991, ".repeat(30)}0)`), [])],
    ["a negative length", npy(header("<f8", "False", "(-1,)"), [])],
    ["a length of 1e1000", npy(header("<f8", "False", `(1${"0".repeat(999)},)`), oneAndAHalf)],
    ["65 axes", npy(header("<f8", "False", `(${"1, ".repeat(65)})`), oneAndAHalf)],
    ["a number as shape", npy(header("<f8", "False", "(1)"), oneAndAHalf)],
    ["pickled objects", npy(header("|O", "False", "(1,)"), oneAndAHalf)],
    ["integers", npy(header("<i8", "False", "(1,)"), oneAndAHalf)],
    ["complex numbers", npy(header("<c16", "False", "(1,)"), [...oneAndAHalf, ...oneAndAHalf])],
    ["doubles of no byte order", npy(header("|f8", "False", "(1,)"), oneAndAHalf)],
    ["long doubles", npy(header("<f16", "False", "(1,)"), [...oneAndAHalf, ...oneAndAHalf])],
    ["structures", npy("{'descr': [('a', '<f8')], 'fortran_order': False, 'shape': (1,), }", oneAndAHalf)],
    ["a text", npy(header("<U2", "False", "()"), oneAndAHalf)],
    ["code in the header", npy("{'descr': __import__('os'), 'fortran_order': False, 'shape': (1,), }", oneAndAHalf)],
    ["a key twice", npy("{'descr': '<f8', 'descr': '<f8', 'shape': (1,), }", oneAndAHalf)],
    ["a key too many", npy("{'descr': '<f8', 'fortran_order': False, 'shape': (1,), 'x': 1}", oneAndAHalf)],
    ["a key too few", npy("{'descr': '<f8', 'shape': (1,), }", oneAndAHalf)],
    ["a header that ends beyond the file", joined(text("\x93NUMPY"), [1, 0, 255, 255, 0, 0])],
    ["a header of 11000 bytes", npy(header("<f8", "False", "(1,)").padEnd(11_000), oneAndAHalf)],
  ])("refuses %s", (_, bytes) => expect(codeOf(() => arrayFromNpy(bytes))).toBe("invalid-file"));

  test("is its own inverse to the bit", () => {
    const numbers = fc.array(fc.double(), { maxLength: 30 });
    fc.assert(
      fc.property(numbers, (list) => {
        const values = Float64Array.from(list);
        const read = arrayFromNpy(arrayToNpy({ shape: [list.length], values }));
        expect(new BigUint64Array(read.values.buffer)).toEqual(new BigUint64Array(values.buffer));
      }),
      { seed: 2, numRuns: 100 },
    );
  });
});

/** A stored archive made by hand from the APPNOTE: local headers (4.3.7), directory (4.3.12), end (4.3.16). */
interface Parts {
  readonly method?: number;
  readonly flags?: number;
  readonly localName?: string;
  readonly size?: number;
  readonly sum?: number;
  readonly offset?: number;
}
function archive(
  members: readonly (readonly [name: string, data: Uint8Array, parts?: Parts])[],
  count?: number,
): Uint8Array {
  let local: Uint8Array = new Uint8Array(0);
  let central: Uint8Array = new Uint8Array(0);
  for (const [name, data, parts = {}] of members) {
    const {
      method = 0,
      flags = 0,
      localName = name,
      size = data.length,
      sum = crc32(data),
      offset = local.length,
    } = parts;
    const common = (length: number) => [
      ...[20, flags, method, 0, 0x21].flatMap((one) => little(one, 2)),
      ...[sum, size, size].flatMap((one) => little(one, 4)),
      ...little(length, 2),
      ...[0, 0],
    ];
    const entry = [
      ...text("PK\x01\x02"),
      ...little(20, 2),
      ...common(name.length),
      ...little(0, 10),
      ...little(offset, 4),
    ];
    central = joined(central, entry, text(name));
    local = joined(local, text("PK\x03\x04"), common(localName.length), text(localName), data);
  }
  const entries = little(count ?? members.length, 2);
  const sizes = [...little(central.length, 4), ...little(local.length, 4)];
  return joined(local, central, text("PK\x05\x06"), [0, 0, 0, 0], entries, entries, sizes, [0, 0]);
}

describe(".npz", () => {
  const member = arrayToNpy(array);
  const bytes = arraysToNpz({ a: array, note: "\u03c1 in g/cm\u00b3 \u{1f31f}" });

  test("is the stored archive that the specification describes, byte for byte", () => {
    expect(arraysToNpz({ a: array, b: array })).toEqual(
      archive([
        ["a.npy", member],
        ["b.npy", member],
      ]),
    );
  });

  test("gives back numbers and texts", () => {
    const read = arraysFromNpz(bytes);
    expect([...read.keys()]).toEqual(["a", "note"]);
    expect(read.get("a")).toEqual(array);
    expect(Object.is((read.get("a") as NumberArray).values[1], -0)).toBe(true);
    expect(read.get("note")).toBe("\u03c1 in g/cm\u00b3 \u{1f31f}");
    expect(arraysFromNpz(arraysToNpz({ empty: "" })).get("empty")).toBe("");
    expect(arraysFromNpz(arraysToNpz({})).size).toBe(0);
  });

  test("a name of Object's is a name like any other", () => {
    const read = arraysFromNpz(archive([["__proto__.npy", member]]));
    expect(read.get("__proto__")).toEqual(array);
  });

  test("every truncation and every flipped bit is refused, or changes no number", () => {
    const small = arraysToNpz({ x: { shape: [1], values: Float64Array.of(1.5) } });
    for (let length = 0; length < small.length; length++) {
      expect(codeOf(() => arraysFromNpz(small.subarray(0, length)))).toBe("invalid-file");
    }
    let survived = 0;
    for (let bit = 0; bit < 8 * small.length; bit++) {
      const damaged = small.slice();
      damaged[bit >> 3]! ^= 1 << (bit & 7);
      const code = codeOf(() => {
        const read = arraysFromNpz(damaged);
        expect([...read.values()]).toEqual([{ shape: [1], values: Float64Array.of(1.5) }]);
        survived += 1;
      });
      expect(code === undefined || code === "invalid-file").toBe(true);
    }
    // Versions, dates and attributes of the archive are not read: a flip there does no harm.
    expect(survived).toBeLessThan(8 * 44);
  });

  test.each<[string, Uint8Array]>([
    ["nothing", new Uint8Array(0)],
    ["a lone end that claims a member", archive([], 1)],
    [
      "a name twice",
      archive([
        ["a.npy", member],
        ["a.npy", member],
      ]),
    ],
    [
      "members that overlap",
      archive(
        [
          ["a.npy", member],
          ["a.npy", member, { offset: 0 }],
        ].map(([n, d, p], i) => [
          i === 0 ? (n as string) : "b.npy",
          d as Uint8Array,
          { ...(p as Parts), localName: "a.npy" },
        ]),
      ),
    ],
    [
      "a thousand names for one member",
      archive([
        ["a.npy", member],
        ...Array.from(
          { length: 1000 },
          () => ["a.npy", new Uint8Array(0), { offset: 0, size: member.length, sum: crc32(member) }] as const,
        ),
      ]),
    ],
    ["compressed members", archive([["a.npy", member, { method: 8 }]])],
    ["encrypted members", archive([["a.npy", member, { flags: 1 }]])],
    ["a size beyond the file", archive([["a.npy", member, { size: 4e9 }]])],
    ["a wrong check sum", archive([["a.npy", member, { sum: 1 }]])],
    ["an offset beyond the file", archive([["a.npy", member, { offset: 4e9 }]])],
    ["a local header of another name", archive([["a.npy", member, { localName: "b.npy" }]])],
    ["a member that is no .npy", archive([["a.txt", member]])],
    ["a member that only claims to be", archive([["a.npy", text("hello")]])],
    ["a name of control characters", archive([["a\n.npy", member]])],
    ["bytes before the archive", joined([1, 2, 3], archive([["a.npy", member]]))],
    ["bytes behind it", joined(archive([["a.npy", member]]), [1])],
  ])("refuses %s", (_, given) => expect(codeOf(() => arraysFromNpz(given))).toBe("invalid-file"));

  test.each<[string, () => unknown, string]>([
    ["no bytes", () => arraysFromNpz("x" as unknown as Uint8Array), "invalid-option"],
    ["no bytes for .npy", () => arrayFromNpy([1] as unknown as Uint8Array), "invalid-option"],
    ["no arrays", () => arraysToNpz(null as unknown as Record<string, string>), "invalid-option"],
    ["a folder in a name", () => arraysToNpz({ "../a": array }), "invalid-option"],
    [
      "a list instead of doubles",
      () => arrayToNpy({ shape: [1], values: [1] as unknown as Float64Array }),
      "invalid-option",
    ],
    ["a shape of 1.5", () => arrayToNpy({ shape: [1.5], values: Float64Array.of(1) }), "invalid-option"],
    ["a shape that does not fit", () => arrayToNpy({ shape: [3], values: Float64Array.of(1) }), "length-mismatch"],
  ])("refuses %s as an argument", (_, action, code) => expect(codeOf(action)).toBe(code));

  test("random changes of a larger archive: a typed error or a correct read", () => {
    const change = fc.tuple(fc.nat(bytes.length - 1), fc.nat(255));
    fc.assert(
      fc.property(fc.array(change, { minLength: 1, maxLength: 6 }), (changes) => {
        const damaged = bytes.slice();
        for (const [at, value] of changes) damaged[at] = value;
        const code = codeOf(() => expect(arraysFromNpz(damaged).get("a")).toEqual(array));
        expect(code === undefined || code === "invalid-file").toBe(true);
      }),
      { seed: 3, numRuns: 1000 },
    );
  });
});

const made = grid(whiteDwarfMatter(), composition({ C12: 0.5, O16: 0.5 }), {
  density: [1e4, 1e6, 1e8],
  temperature: [1e7, 1e9],
  quantities: ["pressure", "gamma1"],
});

test("a grid: axes, columns with one row per temperature, and what they mean", () => {
  const bytes = gridToNpz(made, { note: "mine" });
  expect(gridToNpz(made, { note: "mine" })).toEqual(bytes);
  const read = arraysFromNpz(bytes);
  expect([...read.keys()]).toEqual(["density", "temperature", "pressure", "gamma1", "description"]);
  expect(read.get("pressure")).toEqual({ shape: [2, 3], values: made.columns.pressure });
  expect(read.get("density")).toEqual({ shape: [3], values: Float64Array.of(1e4, 1e6, 1e8) });
  const about = JSON.parse(read.get("description") as string);
  expect(about.note).toBe("mine");
  expect(about.columns.pressure.unit).toBe("dyn/cm^2");
  expect(about.composition).toEqual({ C12: 0.5, O16: 0.5 });
});

describe("NumPy itself", () => {
  const folder = mkdtempSync(join(tmpdir(), "fermistate-npz-"));
  afterAll(() => rmSync(folder, { recursive: true, force: true }));
  const python = (code: string) => spawnSync("python3", ["-c", code], { cwd: folder, encoding: "utf8" });
  const isThere = python("import numpy").status === 0;
  if (!isThere && !process.env["CI"]) console.log("skipped: python3 with numpy is not installed");

  test.skipIf(!isThere && !process.env["CI"])("reads what is written, the same bits", () => {
    writeFileSync(join(folder, "grid.npz"), gridToNpz(made));
    writeFileSync(join(folder, "a.npy"), arrayToNpy(array));
    const { stdout, stderr } = python(
      "import json, numpy as np\nd = np.load('grid.npz', allow_pickle=False)\na = np.load('a.npy', allow_pickle=False)\n" +
        "print(json.dumps({'names': d.files, 'shape': d['pressure'].shape, 'hex': [x.hex() for x in d['pressure'].ravel()],\n" +
        "'unit': json.loads(str(d['description']))['columns']['pressure']['unit'], 'a': a.tobytes().hex(), 'aShape': a.shape}))",
    );
    expect(stderr).toBe("");
    const said = JSON.parse(stdout);
    expect(said.names).toEqual(["density", "temperature", "pressure", "gamma1", "description"]);
    expect(said.shape).toEqual([2, 3]);
    expect(said.unit).toBe("dyn/cm^2");
    expect(said.a).toBe(Buffer.from(array.values.buffer as ArrayBuffer).toString("hex"));
    const hex = (value: number): string => {
      const exponent = Math.floor(Math.log2(value));
      const fraction = (BigInt(value / 2 ** (exponent - 52)) & (2n ** 52n - 1n)).toString(16).padStart(13, "0");
      return `0x1.${fraction}p+${exponent}`;
    };
    expect(said.hex).toEqual([...made.columns.pressure!].map(hex));
  });

  test.skipIf(!isThere && !process.env["CI"])("writes what is read", () => {
    const { stderr } = python(
      "import numpy as np\nx = np.arange(24.).reshape(2, 3, 4)/7\n" +
        "np.savez('own.npz', c=x, f=np.asfortranarray(x), big=x.astype('>f8'), small=x.astype('<f4'), words='hello', one=np.float64(2.5))\n" +
        "np.savez_compressed('packed.npz', c=x)\nnp.savez('objects.npz', o=np.array([{}], dtype=object))\nnp.savez('whole.npz', i=np.arange(3))\n" +
        "np.lib.format.write_array(open('v3.npy', 'wb'), x, version=(3, 0))",
    );
    expect(stderr).toBe("");
    const bytesOf = (name: string) => new Uint8Array(readFileSync(join(folder, name)));
    const read = arraysFromNpz(bytesOf("own.npz"));
    const x = Float64Array.from({ length: 24 }, (_, i) => i / 7);
    for (const name of ["c", "f", "big"]) expect(read.get(name)).toEqual({ shape: [2, 3, 4], values: x });
    expect(read.get("small")).toEqual({ shape: [2, 3, 4], values: x.map(Math.fround) });
    expect(read.get("words")).toBe("hello");
    expect(read.get("one")).toEqual({ shape: [], values: Float64Array.of(2.5) });
    expect(arrayFromNpy(bytesOf("v3.npy"))).toEqual({ shape: [2, 3, 4], values: x });
    for (const name of ["packed.npz", "objects.npz", "whole.npz"]) {
      expect(codeOf(() => arraysFromNpz(bytesOf(name)))).toBe("invalid-file");
    }
  });
});
