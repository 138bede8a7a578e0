import { fitInversion } from './inversion.ts';
import { fitMuscleBend } from './muscle-bend.ts';
import { fitTailLength } from './tail-length.ts';
import { fitTransition } from './transition.ts';
import type { TrialFit, TrialMachine, TrialPoints } from './trial.ts';

/** Fits the points of any trial, with what the machine is taken to be otherwise. */
export const fitTrial = (trial: TrialPoints, { body, muscles }: TrialMachine): TrialFit => {
  switch (trial.kind) {
    case 'tail-length':
      return fitTailLength(trial.points);
    case 'muscle-bend':
      return fitMuscleBend(trial.points, muscles);
    case 'inversion':
      return fitInversion(trial.points, body);
    case 'transition':
      return fitTransition(trial.points, body);
  }
};
