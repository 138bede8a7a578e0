import { expect, it } from 'vitest';
import { withComment } from '../../../main/record/jpeg-comment.ts';

// Markers as in ITU-T T.81, table B.1 and B.1.1.4: SOI FFD8, COM FFFE, EOI FFD9; a segment's length counts its own two bytes.
it('puts the comment directly behind the start of the picture and keeps every byte of it', () => {
  const picture = new Uint8Array([0xff, 0xd8, 0xff, 0xd9]);
  expect([...withComment(picture, 'Hi')]).toEqual([
    0xff, 0xd8, 0xff, 0xfe, 0x00, 0x04, 0x48, 0x69, 0xff, 0xd9,
  ]);
});

it('leaves alone what is no JPEG', () => {
  const bytes = new Uint8Array([0x89, 0x50, 0x4e, 0x47]);
  expect(withComment(bytes, 'Hi')).toBe(bytes);
});
