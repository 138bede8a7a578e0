/** What gives the picture shown now, set by the camera panel while it shows one. */
type TakeStill = () => Promise<Blob | null>;
let take: TakeStill | null = null;

/** Registers the picture source; returns how to take it away. */
export const offerStills = (source: TakeStill): (() => void) => {
  take = source;
  return () => {
    if (take === source) take = null;
  };
};

/** The picture on screen as a JPEG in base64, or null when none is to be had. */
export const stillPicture = async (): Promise<string | null> => {
  const blob = await (take?.() ?? null);
  if (blob === null) return null;
  const bytes = new Uint8Array(await blob.arrayBuffer());
  let binary = '';
  for (let i = 0; i < bytes.length; i += 0x8000)
    binary += String.fromCharCode(...bytes.subarray(i, i + 0x8000));
  return btoa(binary);
};
