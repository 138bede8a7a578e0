/** Name and version as they stand in every record. */
export const SOFTWARE = 'Foldback 0.1.0';
