/** A request that is answered with a page that says why not, and what can be done instead. */
export class Refusal extends Error {
  readonly code = 'refused';

  constructor(
    readonly status: number,
    readonly title: string,
    readonly explanation: string,
  ) {
    super(title);
    this.name = 'Refusal';
  }
}
