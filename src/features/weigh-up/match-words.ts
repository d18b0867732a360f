function fold(text: string): string {
  return text
    .normalize('NFD')
    .replace(/\p{Diacritic}/gu, '')
    .toLowerCase();
}

/** Whether every word searched for is somewhere in the text, accents and case aside. */
export function matchesWords(text: string, search: string): boolean {
  const folded = fold(text);
  return fold(search)
    .split(/\s+/)
    .every((word) => folded.includes(word));
}
