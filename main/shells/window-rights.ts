import type { Session, WebContents } from 'electron';
import { APP_ORIGIN, isOurs } from './app-protocol.ts';

/** What a page asked to use, and who asks. */
export interface RightAsked {
  readonly permission: string;
  readonly origin: string;
  readonly isMainFrame: boolean;
  readonly media: readonly string[];
}

/** Of all a page can ask for, only our own may have the camera, and no microphone with it. */
export const isGranted = ({ permission, origin, isMainFrame, media }: RightAsked): boolean =>
  permission === 'media' &&
  isMainFrame &&
  isOurs(origin) &&
  media.length > 0 &&
  media.every((kind) => kind === 'video');

/** Denies everything but the camera, loads nothing from elsewhere, and saves nothing to disk. */
export const limitSession = (session: Session): void => {
  session.setPermissionRequestHandler((_, permission, answer, details) => {
    const media = 'mediaTypes' in details ? (details.mediaTypes ?? []) : [];
    answer(isGranted({ permission, origin: details.requestingUrl, isMainFrame: details.isMainFrame, media }));
  });
  session.setPermissionCheckHandler((_, permission, origin, details) =>
    isGranted({
      permission,
      origin,
      isMainFrame: details.isMainFrame,
      media: details.mediaType === undefined ? [] : [details.mediaType],
    }),
  );
  session.setDevicePermissionHandler(() => false);
  session.webRequest.onBeforeRequest((details, answer) => answer({ cancel: !isLoadable(details.url) }));
  session.on('will-download', (event) => event.preventDefault());
};

/** Our own files, and what the page made itself. */
export const isLoadable = (address: string): boolean =>
  isOurs(address) || address.startsWith('data:') || address.startsWith(`blob:${APP_ORIGIN}/`);

/** The window shows our page for ever: it goes nowhere, opens nothing and embeds nothing. */
export const pinToOurPage = (contents: WebContents): void => {
  contents.on('will-navigate', (event) => event.preventDefault());
  contents.on('will-frame-navigate', (event) => event.preventDefault());
  contents.on('will-redirect', (event) => event.preventDefault());
  contents.on('will-attach-webview', (event) => event.preventDefault());
  contents.setWindowOpenHandler(() => ({ action: 'deny' }));
};
