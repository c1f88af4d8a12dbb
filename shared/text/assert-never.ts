/** Ends every `switch` over a closed union: a kind that nobody handles does not compile. */
export function assertNever(value: never): never {
  throw new Error(`unhandled: ${JSON.stringify(value)}`);
}
