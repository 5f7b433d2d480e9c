/** The part of odex that the examples use; odex ships its TypeScript source, which stricter settings than its own refuse. */
export class Solver {
  constructor(dimension: number);
  absoluteTolerance: number | number[];
  relativeTolerance: number | number[];
  initialStepSize: number;
  maxSteps: number;
  solve(
    derivative: (x: number, y: number[]) => number[],
    from: number,
    y: number[],
    to: number,
    observe?: (step: number, from: number, to: number, y: number[]) => void,
  ): { readonly y: number[]; readonly outcome: number; readonly nEval: number; readonly nAccept: number };
}
