/** Where both shells serve the present mission's pictures. */
export const stillUrl = (name: string): string => `./stills/${encodeURIComponent(name)}`;
