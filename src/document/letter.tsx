/** A name as it is drawn: `V_out` is V with the subscript out, and `R1` is R with the subscript 1, as people write them. */
export function letterParts(name: string): { readonly base: string; readonly subscript: string } {
  const [base = name, ...rest] = name.split('_');
  const subscript = rest.join(' ').trim();
  if (subscript !== '') return { base, subscript };
  const numbered = /^([A-Za-z]+)(\d+)$/.exec(name);
  return numbered ? { base: numbered[1] ?? name, subscript: numbered[2] ?? '' } : { base: name, subscript: '' };
}

/** A letter that stands for a quantity. */
export function Letter({ name }: { name: string }) {
  const { base, subscript } = letterParts(name);
  return (
    <span className="quantity-letter">
      {base}
      {subscript !== '' && <sub>{subscript}</sub>}
    </span>
  );
}
