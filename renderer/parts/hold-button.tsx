import { type PointerEvent, type ReactNode, useEffect } from 'react';
import type { HeldPart } from '../drive/hand.ts';
import { hand, useHeld } from '../drive/use-hand.ts';

/** A button that asks only while it is held, by pointer or by Space and Enter. */
export const HoldButton = (props: {
  readonly control: string;
  readonly part: HeldPart;
  readonly label: string;
  readonly className?: string;
  /** Called when a hold begins. */
  readonly onHold?: () => void;
  readonly children: ReactNode;
}) => {
  const held = useHeld(props.control);
  const { control } = props;
  // A control that goes off the screen is let go; its pointer would never tell.
  useEffect(() => () => hand.release(control), [control]);
  const begin = (): void => {
    props.onHold?.();
    hand.hold(control, props.part);
  };
  const start = (event: PointerEvent<HTMLButtonElement>): void => {
    if (event.button !== 0) return;
    event.currentTarget.setPointerCapture(event.pointerId);
    begin();
  };
  const end = (): void => hand.release(control);
  return (
    <button
      type="button"
      className={`hold ${held === 'burnt' ? 'hold-burnt' : ''} ${props.className ?? ''}`}
      aria-label={props.label}
      aria-pressed={held === 'held'}
      onPointerDown={start}
      onPointerUp={end}
      onPointerCancel={end}
      onLostPointerCapture={end}
      onContextMenu={(event) => event.preventDefault()}
      onKeyDown={(event) => {
        if ((event.code !== 'Space' && event.code !== 'Enter') || event.repeat) return;
        event.preventDefault();
        begin();
      }}
      onKeyUp={(event) => {
        if (event.code === 'Space' || event.code === 'Enter') end();
      }}
      onBlur={end}
    >
      {held === 'burnt' ? '▲ Let go' : props.children}
    </button>
  );
};
