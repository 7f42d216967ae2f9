/** The part of odex used here; the package ships sources that do not compile under our settings. */
export class Solver {
  constructor(n: number)
  absoluteTolerance: number
  relativeTolerance: number
  maxSteps: number
  initialStepSize: number
  solve(
    f: (x: number, y: number[]) => number[],
    from: number,
    y: number[],
    to: number,
  ): { y: number[]; outcome: number; nStep: number; nEval: number }
}
