/** A sentence with every quoted absolute path cut to its base name: the window sees no paths. */
export function bareSentence(sentence: string): string {
  return sentence.replace(/"(?:\/|\\\\|[A-Za-z]:[\\/])(?:[^"]*[\\/])?([^"\\/]+)"/g, '"$1"');
}
