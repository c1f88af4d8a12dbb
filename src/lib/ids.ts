const ID_BYTES = 17;

/** Makes an id for a request or a save: 23 characters of base64url, 136 random bits. Works over plain http, unlike `randomUUID`. */
export function newId(): string {
  const bytes = crypto.getRandomValues(new Uint8Array(ID_BYTES));
  return btoa(String.fromCharCode(...bytes))
    .replaceAll('+', '-')
    .replaceAll('/', '_')
    .replaceAll('=', '');
}
