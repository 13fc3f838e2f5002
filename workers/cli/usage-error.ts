/** The command cannot be done as it was given; `message` is one sentence for the person. */
export class UsageError extends Error {
  constructor(message: string) {
    super(message);
    this.name = 'UsageError';
  }
}
