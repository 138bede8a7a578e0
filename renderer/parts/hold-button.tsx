import type { PointerEvent, ReactNode } from 'react';
import type { HeldPart } from '../drive/hand.ts';
import { hand, useHeld } from '../drive/use-hand.ts';

/** A button that asks only while it is held, by pointer or by Space and Enter. */
export const HoldButton = (props: {
  readonly control: string;
  readonly part: HeldPart;
  readonly label: string;
  readonly className?: string;
  readonly disabled?: boolean;
  readonly children: ReactNode;
}) => {
  const held = useHeld(props.control);
  const start = (event: PointerEvent<HTMLButtonElement>): void => {
    if (event.button !== 0) return;
    event.currentTarget.setPointerCapture(event.pointerId);
    hand.hold(props.control, props.part);
  };
  const end = (): void => hand.release(props.control);
  return (
    <button
      type="button"
      className={`hold ${props.className ?? ''}`}
      aria-label={props.label}
      aria-pressed={held}
      disabled={props.disabled === true}
      onPointerDown={start}
      onPointerUp={end}
      onPointerCancel={end}
      onLostPointerCapture={end}
      onContextMenu={(event) => event.preventDefault()}
      onKeyDown={(event) => {
        if ((event.code !== 'Space' && event.code !== 'Enter') || event.repeat) return;
        event.preventDefault();
        hand.hold(props.control, props.part);
      }}
      onKeyUp={(event) => {
        if (event.code === 'Space' || event.code === 'Enter') end();
      }}
      onBlur={end}
    >
      {props.children}
    </button>
  );
};
