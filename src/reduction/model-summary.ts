import type { ScaledCandidate } from './candidates.ts';
import type { ModelChoice } from './choose-model.ts';
import type { Candidate, Model } from './reduction.ts';
import { modelSentence } from './sentences.ts';

/** How the fibre followed the bar, as the results file says it. */
export function turnOf({ proposal, reversal_A }: ScaledCandidate): Model['turn'] {
  if (reversal_A === null) return 'one side';
  // A fibre that is never twisted is one that was set back.
  return proposal.turn === 'free' ? 'set back' : proposal.turn;
}

/** The chosen model and what it was chosen from, best first; `fibreKnownFrom` names the sources of a known stiffness. */
export function modelOf({ chosen, candidates }: ModelChoice, fibreKnownFrom: string): Model {
  const turn = turnOf(chosen);
  return {
    kind: chosen.proposal.kind,
    fibre: chosen.fibre,
    turn,
    sentence: modelSentence(chosen.proposal.kind, chosen.fibre, turn, fibreKnownFrom),
    candidates: [...candidates]
      .sort((a, b) => a.criterion - b.criterion)
      .map((candidate) => summary(candidate, candidate === chosen)),
  };
}

function summary(candidate: ScaledCandidate, chosen: boolean): Candidate {
  return {
    kind: candidate.proposal.kind,
    fibre: candidate.fibre,
    turn: turnOf(candidate),
    reversal_A: candidate.reversal_A,
    chi_square: candidate.statedChiSquare,
    dof: candidate.fit.dof,
    parameters: candidate.fit.free,
    criterion: candidate.criterion,
    chosen,
  };
}
