/** The input is at fault: `message` is a sentence that is shown to the person as it stands. */
export class JobRefusal extends Error {
  constructor(message: string) {
    super(message);
    this.name = 'JobRefusal';
  }
}
