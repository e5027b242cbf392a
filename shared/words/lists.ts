/** "L-118, L-121 and L-122"; more than four are counted: "L-118, L-121, L-122 and 3 more". */
export function list(words: readonly string[]): string {
  if (words.length > 4) return `${words.slice(0, 3).join(', ')} and ${words.length - 3} more`;
  if (words.length < 2) return words.join('');
  return `${words.slice(0, -1).join(', ')} and ${words.at(-1) ?? ''}`;
}
