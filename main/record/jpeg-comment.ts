/**
 * A JPEG with a comment segment behind its start marker, so that the picture itself says where it is from.
 * Anything that does not begin as a JPEG comes back unchanged. Source: ITU-T T.81, B.2.4.5 (COM, 0xFFFE).
 */
export const withComment = (jpeg: Uint8Array, comment: string): Uint8Array => {
  if (!(jpeg[0] === 0xff && jpeg[1] === 0xd8)) return jpeg;
  const text = new TextEncoder().encode(comment).subarray(0, 0xffff - 2);
  const size = text.length + 2;
  const marked = new Uint8Array(jpeg.length + 4 + text.length);
  marked.set(jpeg.subarray(0, 2));
  marked.set([0xff, 0xfe, size >> 8, size & 0xff], 2);
  marked.set(text, 6);
  marked.set(jpeg.subarray(2), 6 + text.length);
  return marked;
};
