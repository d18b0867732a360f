/** A name with a hyphen, up to the length that a phone holds in a heading's size. */
const hyphenated = /(\p{L}[\p{L}’]*(?:-\p{L}[\p{L}’]*)+)/u;
const longest = 18;

/** A heading's words, of which a name like Haut-Velmar is not broken at its hyphen. */
export function BoundWords({ text }: { text: string }) {
  return text.split(hyphenated).map((part, place) =>
    place % 2 === 1 && part.length <= longest ? (
      // Words have no identity but their place.
      <span key={place} className="whitespace-nowrap">
        {part}
      </span>
    ) : (
      part
    ),
  );
}
