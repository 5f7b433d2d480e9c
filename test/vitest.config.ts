/** Two projects: `source` runs against src, `package` against the tarball, which is built and packed once before it. */
import { fileURLToPath } from "node:url";
import { defineConfig } from "vitest/config";

const root = fileURLToPath(new URL("..", import.meta.url));

/**
 * The test runner keeps the exports of a module as getters on a dictionary, which V8 looks up at every use: a state
 * took four times as long as in the built library. An object that has served as a prototype is no dictionary any more.
 */
const fastExports = {
  name: "fast-exports",
  transform: (code: string, id: string) =>
    id.startsWith(root) && /\/(src|test)\/.*\.ts$/.test(id)
      ? { code: `${code}\n;Object.create(__vite_ssr_exports__).x;`, map: null }
      : undefined,
};

export default defineConfig({
  root,
  test: {
    testTimeout: 60_000,
    maxWorkers: "100%", // by default one processor is left to the runner, which has little to do: half of a machine of two
    coverage: {
      provider: "v8",
      include: ["src/**/*.ts"],
      // The command line is run as a program of its own, where coverage does not reach.
      exclude: ["src/cli/main.ts"],
      reporter: ["text-summary", "json"],
      reportsDirectory: ".cache/coverage",
      thresholds: { statements: 96, branches: 92, functions: 95, lines: 97 },
    },
    projects: [
      {
        root,
        plugins: [fastExports],
        resolve: {
          alias: [
            { find: /^fermistate$/, replacement: `${root}src/index.ts` },
            { find: /^fermistate\/([\w-]+)$/, replacement: `${root}src/$1/index.ts` },
          ],
        },
        test: {
          name: "source",
          include: ["test/**/*.test.ts"],
          exclude: ["test/package/**"],
          testTimeout: 60_000,
        },
      },
      {
        root,
        test: {
          name: "package",
          include: ["test/package/**/*.test.ts"],
          globalSetup: ["test/package/pack.ts"],
          setupFiles: ["test/package/built.ts"],
          server: { deps: { external: [/\/dist\//] } },
          testTimeout: 180_000,
          hookTimeout: 180_000,
        },
      },
    ],
  },
});
