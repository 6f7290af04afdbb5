/** Arguments or input that cannot be used: told in one sentence, exit status 2. */
export class Unusable extends Error {
  override readonly name = 'Unusable';
}
