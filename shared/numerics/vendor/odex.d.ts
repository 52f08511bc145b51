/** The part of odex 2.0.4 that the adapter uses; the package ships sources that do not pass strict checking. */
export const Outcome: { readonly Converged: 0; readonly MaxStepsExceeded: 1; readonly EarlyReturn: 2 };

export interface SolveResult {
  y: number[];
  outcome: number;
  nStep: number;
  nAccept: number;
  nReject: number;
  nEval: number;
}

export type StepCallback = (
  nr: number,
  xOld: number,
  x: number,
  y: number[],
  dense: ((component: number, x: number) => number) | undefined,
) => boolean | undefined;

export class Solver {
  constructor(n: number);
  maxSteps: number;
  initialStepSize: number;
  maxStepSize: number;
  denseOutput: boolean;
  relativeTolerance: number;
  absoluteTolerance: number;
  solve(
    f: (x: number, y: number[]) => number[],
    x0: number,
    y0: number[],
    xEnd: number,
    onStep?: StepCallback,
  ): SolveResult;
}
