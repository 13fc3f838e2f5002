/** Letters, digits, `_`, `-` and inner dots; no empty part, no `.` or `..`, nothing absolute. */
const KEY = /^[A-Za-z0-9_-]+(?:\.[A-Za-z0-9_-]+)*(?:\/[A-Za-z0-9_-]+(?:\.[A-Za-z0-9_-]+)*)*$/;
const LONGEST_KEY = 200;

/** Whether a text may name a stored file: it can never leave the storage folder. */
export function isStorageKey(text: string): boolean {
  return text.length <= LONGEST_KEY && KEY.test(text);
}

/** Folder of one revision of a model. */
export function revisionFolder(ids: {
  workshopId: string;
  modelId: string;
  revisionId: string;
}): string {
  return `${modelFolder(ids)}/${ids.revisionId}`;
}

/** Folder of a model with all its revisions. */
export function modelFolder(ids: { workshopId: string; modelId: string }): string {
  return `workshops/${ids.workshopId}/models/${ids.modelId}`;
}

/** Folder of what a plan's job writes. */
export function planFolder(ids: { workshopId: string; planId: string }): string {
  return `workshops/${ids.workshopId}/plans/${ids.planId}`;
}
