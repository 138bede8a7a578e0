import { CloseDialog, ConsoleDialog } from '../parts/console-dialog.tsx';

/** A second step for what must not happen by one press. Never used for Stop. */
export const ConfirmDialog = (props: {
  readonly open: boolean;
  readonly title: string;
  readonly text: string;
  readonly confirm: string;
  readonly onConfirm: () => void;
  readonly onClose: () => void;
}) => (
  <ConsoleDialog
    title={props.title}
    description={props.text}
    open={props.open}
    onOpenChange={(open) => (open ? undefined : props.onClose())}
  >
    <button
      type="button"
      className="go"
      onClick={() => {
        props.onClose();
        props.onConfirm();
      }}
    >
      {props.confirm}
    </button>
    <CloseDialog>Not yet</CloseDialog>
  </ConsoleDialog>
);
