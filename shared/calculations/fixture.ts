/** A request and its whole result, worked out by hand or by a published source; tests and API checks share them. */
export interface Fixture<Request, Result> {
  name: string;
  /** Where the figures come from. */
  source: string;
  request: Request;
  result: Result;
}
