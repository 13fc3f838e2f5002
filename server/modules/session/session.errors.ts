import { ApiError } from '../../platform/http/api-error.js';

/** The same for an unknown address and a wrong password: which of the two stays our secret. */
export const createWrongCredentials = () =>
  new ApiError(401, 'session.wrongCredentials', 'The e-mail address or the password is not right.');
