/** Size of an SVG document in its own units, as its root says. */
export function svgSize(svg: string): { readonly width: number; readonly height: number } {
  const box = /viewBox="0 0 ([\d.]+) ([\d.]+)"/.exec(svg);
  return { width: Number(box?.[1] ?? 720), height: Number(box?.[2] ?? 420) };
}

/** Paints an SVG document as a PNG picture, `scale` pixels per unit; null where the browser can't. */
export async function pngOf(
  svg: string,
  size: { readonly width: number; readonly height: number },
  scale: number,
): Promise<Uint8Array<ArrayBuffer> | null> {
  const address = URL.createObjectURL(new Blob([svg], { type: 'image/svg+xml' }));
  try {
    const image = new Image();
    image.src = address;
    await image.decode();
    const canvas = document.createElement('canvas');
    canvas.width = Math.round(size.width * scale);
    canvas.height = Math.round(size.height * scale);
    canvas.getContext('2d')?.drawImage(image, 0, 0, canvas.width, canvas.height);
    const blob = await new Promise<Blob | null>((resolve) => canvas.toBlob(resolve, 'image/png'));
    return blob && new Uint8Array(await blob.arrayBuffer());
  } finally {
    URL.revokeObjectURL(address);
  }
}
