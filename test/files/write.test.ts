/**
 * Files whole or not at all: every failure that can be made here is made, and the folder is looked at afterwards.
 * The behaviour of rename, link and open with O_EXCL is POSIX.1-2017's.
 */
import { execFileSync } from "node:child_process";
import {
  chmodSync,
  existsSync,
  linkSync,
  lstatSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  statSync,
  symlinkSync,
  writeFileSync,
} from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { type FermistateError, isFermistateError } from "fermistate";
import { type TextFile, type WriteOptions, writeText, writeTexts } from "fermistate/files";
import { afterEach, beforeEach, describe, expect, test } from "vitest";
import { reasonOf } from "../../src/files/refusal.js";

let folder = "";
const at = (name: string): string => join(folder, name);
const read = (name: string): string => readFileSync(at(name), "utf8");

beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), "fermistate-files-"));
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

async function errorOf(promise: Promise<unknown>): Promise<FermistateError> {
  try {
    await promise;
  } catch (error) {
    if (isFermistateError(error)) return error;
    throw error;
  }
  throw new Error("nothing was thrown");
}

describe("what is written", () => {
  test("bytes as they are", async () => {
    const bytes = Uint8Array.of(0, 255, 13, 10, 0xc3, 0x28);
    expect(await writeText(at("a"), bytes.subarray(1))).toEqual({ path: at("a"), bytes: 5 });
    expect([...readFileSync(at("a"))]).toEqual([255, 13, 10, 0xc3, 0x28]);
    await writeText(at("c"), new Uint8Array(0));
    expect(readFileSync(at("c"))).toHaveLength(0);
  });

  test("a string, pieces, pieces that come later; the length in bytes, not characters", async () => {
    expect(await writeText(at("a.txt"), "\u03c1 = 1\n")).toEqual({ path: at("a.txt"), bytes: 7 });
    function* pieces() {
      for (let i = 0; i < 1000; i++) yield `${i}\n`;
    }
    await writeText(at("b.txt"), pieces());
    async function* later() {
      yield "a";
      await new Promise((resolve) => setTimeout(resolve, 5));
      yield "b";
    }
    await writeText(at("c.txt"), later());
    await writeText(at("d.txt"), []);
    expect(read("a.txt")).toBe("\u03c1 = 1\n");
    expect(read("b.txt").split("\n")).toHaveLength(1001);
    expect([read("c.txt"), read("d.txt")]).toEqual(["ab", ""]);
    expect(readdirSync(folder).sort()).toEqual(["a.txt", "b.txt", "c.txt", "d.txt"]);
  });

  test("an existing file is replaced and keeps its permissions; another name of it keeps the old text", async () => {
    writeFileSync(at("a.txt"), "old");
    chmodSync(at("a.txt"), 0o666);
    linkSync(at("a.txt"), at("other.txt"));
    await writeText(at("a.txt"), "new");
    expect([read("a.txt"), read("other.txt")]).toEqual(["new", "old"]);
    expect(statSync(at("a.txt")).mode & 0o777).toBe(0o666);
  });

  test("the old file stays whole until the new one is", async () => {
    writeFileSync(at("a.txt"), "old");
    function* pieces() {
      yield "new ";
      expect(read("a.txt")).toBe("old");
      yield "text";
    }
    await writeText(at("a.txt"), pieces());
    expect(read("a.txt")).toBe("new text");
  });

  test("through a symbolic link the file it names is replaced, the link stays", async () => {
    mkdirSync(at("data"));
    writeFileSync(at("data/real.txt"), "old");
    symlinkSync("data/real.txt", at("link.txt"));
    await writeText(at("link.txt"), "new");
    expect(lstatSync(at("link.txt")).isSymbolicLink()).toBe(true);
    expect(read("data/real.txt")).toBe("new");
    expect(readdirSync(at("data"))).toEqual(["real.txt"]);
  });

  test("a folder that is a symbolic link is followed", async () => {
    mkdirSync(at("data"));
    symlinkSync("data", at("link"));
    await writeText(at("link/a.txt"), "a");
    expect(read("data/a.txt")).toBe("a");
  });

  test("folders are made where that is wanted", async () => {
    await writeText(at("x/y/a.txt"), "a", { createFolders: true });
    expect(read("x/y/a.txt")).toBe("a");
  });

  test("a set: no name is taken before the last text is complete", async () => {
    const seen: string[][] = [];
    function* watching(): Generator<string> {
      seen.push(readdirSync(folder).filter((name) => !name.startsWith(".")));
      yield "last";
    }
    const written = await writeTexts([
      { path: at("a.csv"), text: "first" },
      { path: at("a.json"), text: watching() },
    ]);
    expect(seen).toEqual([[]]);
    expect(written.map(({ bytes }) => bytes)).toEqual([5, 4]);
    expect(readdirSync(folder).sort()).toEqual(["a.csv", "a.json"]);
  });
});

describe("what fails leaves nothing", () => {
  /** Asks for a refusal with a reason, and that the folder is as it was. */
  async function expectRefused(
    files: TextFile[],
    reason: RegExp,
    options: WriteOptions = {},
  ): Promise<FermistateError> {
    const before = readdirSync(folder, { recursive: true }).sort();
    const error = await errorOf(writeTexts(files, options));
    expect(error.code).toBe("file-not-written");
    expect(error.message).toMatch(reason);
    expect(files.map(({ path }) => path)).toContain(error.given);
    expect(readdirSync(folder, { recursive: true }).sort()).toEqual(before);
    return error;
  }

  test("a missing folder", () =>
    expectRefused([{ path: at("no/a.txt"), text: "a" }], /folder does not exist \(ENOENT\)/));

  test("a path through a file, with and without making folders", async () => {
    writeFileSync(at("file"), "");
    const files = [{ path: at("file/a.txt"), text: "a" }];
    await expectRefused(files, /a part of the path is a file/);
    await expectRefused(files, /a part of the path is a file/, { createFolders: true });
    await expectRefused([{ path: at("file/b/a.txt"), text: "a" }], /a part of the path is a file/, {
      createFolders: true,
    });
  });

  test("a folder as target", async () => {
    mkdirSync(at("a"));
    await expectRefused([{ path: at("a"), text: "a" }], /a folder of this name exists/);
    await expectRefused([{ path: at("b/"), text: "a" }], /ends like that of a folder/);
  });

  test("a pipe as target, also behind a link, is refused and stays a pipe", async () => {
    // A pipe of our own stands for devices: a defect here must not destroy /dev/null.
    execFileSync("mkfifo", [at("pipe")]);
    symlinkSync("pipe", at("link"));
    await expectRefused([{ path: at("pipe"), text: "a" }], /a device, pipe or socket/);
    await expectRefused([{ path: at("link"), text: "a" }], /a device, pipe or socket/);
    expect(statSync(at("pipe")).isFIFO()).toBe(true);
  });

  test("a symbolic link to nothing, and one in a circle", async () => {
    symlinkSync("nowhere", at("a"));
    symlinkSync("b", at("b"));
    await expectRefused([{ path: at("a"), text: "a" }], /leads to nothing/);
    await expectRefused([{ path: at("b"), text: "a" }], /circle \(ELOOP\)/);
  });

  test("a name that is too long", () => expectRefused([{ path: at("a".repeat(300)), text: "a" }], /name is too long/));

  test("an existing file that is not to be replaced, and the rest of its set", async () => {
    writeFileSync(at("b.txt"), "old");
    const files = [
      { path: at("a.txt"), text: "a" },
      { path: at("b.txt"), text: "b" },
    ];
    await expectRefused(files, /exists and was not to be replaced/, { overwrite: false });
    expect(read("b.txt")).toBe("old");
  });

  test("a file that appears while the text is made is not replaced either", async () => {
    function* slow() {
      yield "mine";
      writeFileSync(at("a.txt"), "theirs");
    }
    const error = await errorOf(writeText(at("a.txt"), slow(), { overwrite: false }));
    expect(error.message).toMatch(/exists and was not to be replaced/);
    expect(readdirSync(folder)).toEqual(["a.txt"]);
    expect(read("a.txt")).toBe("theirs");
  });

  test("a text whose making fails: its own error comes through, no file of the set is there", async () => {
    function* failing() {
      yield "a";
      throw new RangeError("no more");
    }
    const files = [
      { path: at("x/a.txt"), text: "a" },
      { path: at("y/b.txt"), text: failing() },
    ];
    await expect(writeTexts(files, { createFolders: true })).rejects.toThrow(new RangeError("no more"));
    expect(readdirSync(folder)).toEqual([]);
  });

  test("bytes are written as they are, whole; a piece of a text is never taken for bytes", async () => {
    const bytes = Uint8Array.of(0x93, 0, 255, 10);
    expect((await writeText(at("a.npy"), bytes)).bytes).toBe(4);
    expect([...readFileSync(at("a.npy"))]).toEqual([...bytes]);
    const error = await errorOf(writeText(at("b.txt"), [bytes as unknown as string]));
    expect(error).toMatchObject({ code: "invalid-option", argument: "text" });
    expect(readdirSync(folder)).toEqual(["a.npy"]);
  });

  test("a piece that is no string", async () => {
    const error = await errorOf(writeText(at("a.txt"), ["a", 3 as unknown as string]));
    expect(error).toMatchObject({ code: "invalid-option", given: 3 });
    expect(readdirSync(folder)).toEqual([]);
  });

  test("an interruption", async () => {
    const controller = new AbortController();
    function* pieces() {
      yield "a";
      controller.abort();
      yield "b";
    }
    const files = [{ path: at("a.txt"), text: pieces() }];
    await expectRefused(files, /interrupted/, { signal: controller.signal });
  });

  test("folders made for nothing are removed, those of others are not", async () => {
    mkdirSync(at("there"));
    mkdirSync(at("there/target"));
    const files = [
      { path: at("new/deep/a.txt"), text: "a" },
      { path: at("there/target"), text: "a" },
    ];
    await expectRefused(files, /a folder of this name/, { createFolders: true });
    expect(existsSync(at("new"))).toBe(false);
    expect(existsSync(at("there/target"))).toBe(true);
  });

  test("a full medium: the limit of file sizes stops a program in the middle of a file", () => {
    // POSIX.1-2017 ulimit -f: blocks of 512 bytes; write then fails with EFBIG, as it does with ENOSPC on a full disk.
    const script = at("write.mts");
    const source = fileURLToPath(new URL("../../src/files/index.ts", import.meta.url));
    writeFileSync(
      script,
      `import { writeTexts } from ${JSON.stringify(source)};
      const files = [{ path: "a.txt", text: "small" }, { path: "b.txt", text: Array(50).fill("x".repeat(10000)) }];
      await writeTexts(files).catch((error) => console.log(error.code, error.message));`,
    );
    const loader = fileURLToPath(new URL("../../node_modules/tsx/dist/loader.mjs", import.meta.url));
    // The cache of the loader would meet the limit too.
    const environment = { ...process.env, TSX_DISABLE_CACHE: "1" };
    const printed = execFileSync("sh", ["-c", `ulimit -f 200; exec node --import "${loader}" write.mts`], {
      cwd: folder,
      encoding: "utf8",
      env: environment,
    });
    expect(printed).toMatch(/^file-not-written path: given "b\.txt".*largest size allowed \(EFBIG\)/);
    expect(readdirSync(folder)).toEqual(["write.mts"]);
  });

  test("no permission, for root a file system that takes no new files", async () => {
    if (process.getuid?.() === 0) {
      const error = await errorOf(writeText("/sys/fermistate.txt", "a"));
      expect(error.message).toMatch(
        /(permission is denied \(EACCES\)|is read-only \(EROFS\)|does not permit it \(EPERM\))$/,
      );
      return;
    }
    mkdirSync(at("locked"));
    chmodSync(at("locked"), 0o555);
    await expectRefused([{ path: at("locked/a.txt"), text: "a" }], /permission is denied \(EACCES\)/);
  });
});

test("reasons are in words, with the system's code; an unknown one keeps the system's message", () => {
  const reason = (code: string) => reasonOf(Object.assign(new Error(`${code}: told by the system`), { code }));
  expect(reason("ENOSPC")).toBe("no space is left on the device (ENOSPC)");
  expect(reason("EROFS")).toBe("the file system is read-only (EROFS)");
  expect(reason("EXYZ")).toBe("EXYZ: told by the system");
});

test.each([
  ["an empty path", [{ path: "", text: "a" }], {}, "path"],
  ["a path with a zero character", [{ path: "a\0b", text: "a" }], {}, "path"],
  ["a number for a path", [{ path: 3, text: "a" }], {}, "path"],
  ["a number for a text", [{ path: "a", text: 3 }], {}, "text"],
  ["no list", { path: "a", text: "a" }, {}, "files"],
  ["an unknown option", [], { replace: true }, "options"],
  ["a text for a switch", [], { overwrite: "no" }, "options"],
  ["no signal", [], { signal: 3 }, "options"],
  ["null", [], null, "options"],
])("%s is refused", async (_, files, options, argument) => {
  const error = await errorOf(writeTexts(files as TextFile[], options as WriteOptions));
  expect([error.code, error.argument]).toEqual(["invalid-option", argument]);
});

test("the same file twice in a set is refused, by any path", async () => {
  const twice = (a: string, b: string) => errorOf(writeTexts([a, b].map((path) => ({ path, text: "a" }))));
  symlinkSync("a.txt", at("link.txt"));
  writeFileSync(at("a.txt"), "old");
  for (const other of [at("a.txt"), join(folder, "x", "..", "a.txt"), at("link.txt")]) {
    expect(await twice(at("a.txt"), other)).toMatchObject({ code: "invalid-option", argument: "path", given: other });
  }
  expect(readdirSync(folder).sort()).toEqual(["a.txt", "link.txt"]);
  expect(read("a.txt")).toBe("old");
});
