import { type ModelResponse } from '../../../shared/api/models.contract.js';
import { type Question } from '../ui/confirm-dialog/confirm-dialog';

/** What is asked before a model goes. */
export function removalQuestion(model: ModelResponse): Question {
  const plans = model.planCount === 1 ? 'its plan' : `its ${model.planCount} plans`;
  const what =
    model.planCount === 0 ? 'Its file and report go' : `Its file, its report and ${plans} go`;
  return {
    title: `Remove ${model.name}?`,
    sentence: `${what} for everyone in the workshop. This cannot be undone.`,
    action: 'Remove',
  };
}
