'use client';

import { useRef, type ReactNode } from 'react';

/** Named one by one, so that a phone hands over a JPEG and not its own format. */
const PICTURES = 'image/png,image/jpeg,image/tiff,image/webp,.png,.jpg,.jpeg,.tif,.tiff,.webp';
const SCANS = 'text/csv,text/plain,text/tab-separated-values,.csv,.txt,.tsv,.dat';
const ACCEPT = `${PICTURES},${SCANS}`;

interface Props {
  onFiles: (files: File[]) => void;
  className: string;
  /** Opens the camera of a phone or a tablet. */
  camera?: boolean;
  single?: boolean;
  disabled?: boolean;
  children: ReactNode;
}

/** A button that opens the file chooser or the camera. */
export function ChooseFiles({
  onFiles,
  className,
  camera = false,
  single = false,
  disabled,
  children,
}: Props) {
  const input = useRef<HTMLInputElement>(null);
  return (
    <>
      <button type="button" className={className} disabled={disabled} onClick={() => input.current?.click()}>
        {children}
      </button>
      <input
        ref={input}
        type="file"
        hidden
        aria-hidden="true"
        tabIndex={-1}
        accept={camera ? 'image/jpeg' : ACCEPT}
        capture={camera ? 'environment' : undefined}
        multiple={!camera && !single}
        onChange={(event) => {
          onFiles([...(event.target.files ?? [])]);
          event.target.value = '';
        }}
      />
    </>
  );
}
