import { type ModelResponse } from '../../../shared/api/models.contract.js';
import { type Question } from '../ui/confirm-dialog/confirm-dialog';

/** What is asked before a model goes. */
export function removalQuestion(model: ModelResponse): Question {
  return {
    title: `Remove ${model.name}?`,
    sentence: 'Its file and its report go for everyone in the workshop. This cannot be undone.',
    action: 'Remove',
  };
}

/** Why a model cannot go yet, or an empty string: plans keep the model they were made of. */
export function removalHindrance(model: ModelResponse): string {
  if (model.planCount === 0) return '';
  return model.planCount === 1
    ? `${model.name} has a plan. Remove the plan first, then the model.`
    : `${model.name} has ${model.planCount} plans. Remove them first, then the model.`;
}
