import { Dialog } from 'radix-ui';

/** A second step for what must not happen by one press. Never used for Stop. */
export const ConfirmDialog = (props: {
  readonly open: boolean;
  readonly title: string;
  readonly text: string;
  readonly confirm: string;
  readonly onConfirm: () => void;
  readonly onClose: () => void;
}) => (
  <Dialog.Root open={props.open} onOpenChange={(open) => (open ? undefined : props.onClose())}>
    <Dialog.Portal>
      <Dialog.Overlay className="overlay" />
      <Dialog.Content className="dialog">
        <Dialog.Title>{props.title}</Dialog.Title>
        <Dialog.Description>{props.text}</Dialog.Description>
        <button
          type="button"
          className="go"
          onClick={() => {
            props.onConfirm();
            props.onClose();
          }}
        >
          {props.confirm}
        </button>
        <Dialog.Close asChild>
          <button type="button">Not yet</button>
        </Dialog.Close>
      </Dialog.Content>
    </Dialog.Portal>
  </Dialog.Root>
);
