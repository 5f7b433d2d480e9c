/** Loaded before each test file of this folder: without a build, each fails with the reason. */
import { inject } from "vitest";

const problem = inject("buildProblem");
if (problem !== "") throw new Error(problem);
