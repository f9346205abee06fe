/** Why a command cannot start, in one line that says what to do. Printed without a stack, exit status 1. */
export class StartRefusal extends Error {
  name = 'StartRefusal';
}
