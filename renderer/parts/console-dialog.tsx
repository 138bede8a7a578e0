import { Dialog } from 'radix-ui';
import { type ReactNode, useEffect } from 'react';
import { hand } from '../drive/use-hand.ts';

/**
 * A dialog under which the strip with Stop stays in reach: it takes the keyboard and covers the rest of the screen, but is
 * not modal, since a modal one would take Stop from pointer and screen reader alike. Opening it lets go of every control.
 */
export const ConsoleDialog = (props: {
  readonly title: string;
  /** Opens it; left out where something else does. */
  readonly trigger?: ReactNode;
  readonly open?: boolean;
  readonly onOpenChange?: (open: boolean) => void;
  readonly description?: string;
  readonly children: ReactNode;
}) => {
  const change = (open: boolean): void => {
    if (open) hand.letGo();
    props.onOpenChange?.(open);
  };
  // One that is opened by the screen itself asks nobody.
  useEffect(() => {
    if (props.open === true) hand.letGo();
  }, [props.open]);
  const described = props.description === undefined ? { 'aria-describedby': undefined } : {};
  return (
    <Dialog.Root
      modal={false}
      onOpenChange={change}
      {...(props.open === undefined ? {} : { open: props.open })}
    >
      {props.trigger === undefined ? null : <Dialog.Trigger asChild>{props.trigger}</Dialog.Trigger>}
      <Dialog.Portal>
        <div className="overlay" aria-hidden="true" />
        <Dialog.Content className="dialog" {...described}>
          <Dialog.Title>{props.title}</Dialog.Title>
          {props.description === undefined ? null : (
            <Dialog.Description>{props.description}</Dialog.Description>
          )}
          {props.children}
        </Dialog.Content>
      </Dialog.Portal>
    </Dialog.Root>
  );
};

/** Closes the dialog it stands in. */
export const CloseDialog = ({ children }: { readonly children: ReactNode }) => (
  <Dialog.Close asChild>
    <button type="button">{children}</button>
  </Dialog.Close>
);
