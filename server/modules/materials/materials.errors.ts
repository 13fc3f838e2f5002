import { ApiError } from '../../platform/http/api-error.js';

export const createMaterialNotFound = () =>
  new ApiError(404, 'material.notFound', 'There is no such material in this workshop.');

export const createMaterialNameTaken = (name: string) =>
  new ApiError(409, 'material.nameTaken', `There is a material named “${name}” already.`, {
    details: [{ path: 'profile.name', message: 'This name is taken' }],
  });

export const createMaterialChanged = () =>
  new ApiError(
    409,
    'material.changed',
    'Someone changed this material meanwhile. Open it again to see the change before you save yours.',
  );
