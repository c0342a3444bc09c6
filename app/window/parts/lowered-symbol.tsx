/** A quantity's symbol in which `_` stands before the sign that is lowered: f_0. */
export function LoweredSymbol({ of: symbol }: { of: string }) {
  const pieces = symbol.split(/(_.)/);
  return <>{pieces.map((piece, i) => (piece.startsWith('_') ? <sub key={i}>{piece.slice(1)}</sub> : piece))}</>;
}
