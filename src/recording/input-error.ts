/**
 * Input that can't be used. Its message is one plain sentence that names the file, the field or the segment and says
 * what was expected; it is shown to the user as it is.
 */
export class InputError extends Error {
  override readonly name = 'InputError';
}
