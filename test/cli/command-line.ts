/** The command line as a function, with what it prints. */
import { run } from "../../src/cli/run.js";

/** What a command returned and printed. */
interface Answer {
  readonly code: number;
  readonly out: string;
  readonly err: string;
}

/**
 * Runs lines of arguments in a folder: words separated by blanks, or a list of them.
 *
 * @param folder asked at every call, for tests that make a folder each
 */
export function commandLine(
  folder: () => string = () => ".",
): (line: string | readonly string[], isTerminal?: boolean) => Promise<Answer> {
  return async (line, isTerminal = false) => {
    let out = "";
    let err = "";
    const io = {
      out: (text: string) => {
        out += text;
        return true;
      },
      err: (text: string) => {
        err += text;
      },
      isTerminal,
      cwd: folder(),
    };
    const code = await run(typeof line === "string" ? line.split(" ").filter((word) => word !== "") : line, io);
    return { code, out, err };
  };
}
