'use client';

import { useDropzone } from 'react-dropzone';
import { HollowOrders, litFor } from '@/components/figures/hollow-orders';
import { buttonClass } from '@/components/ui/button';
import { ChooseFiles } from './choose-files';

interface Props {
  onFiles: (files: File[]) => void;
  /** Why nothing can be dropped yet; null when it can. */
  closed: string | null;
  /** Share of all bytes of the running batch that have left; null when nothing runs. */
  share: number | null;
  shareText: string;
}

const ORDERS = 29;

/** Where frames are dropped; the orders around it fill from the middle as the batch is copied. */
export function DropZone({ onFiles, closed, share, shareText }: Props) {
  const { getRootProps, getInputProps, isDragActive } = useDropzone({
    onDrop: onFiles,
    noClick: true,
    noKeyboard: true,
    disabled: closed !== null,
    useFsAccessApi: false,
  });
  return (
    <div
      {...getRootProps({
        className: `drop ${isDragActive ? 'over' : ''}`,
        role: 'group',
        'aria-label': 'Add frames',
      })}
    >
      <input {...getInputProps({ 'aria-hidden': true, tabIndex: -1 })} />
      <HollowOrders of={ORDERS} lit={share === null ? 0 : litFor(share, ORDERS)} />
      <div className="hole">
        <h2>{isDragActive ? 'Let go to add them' : 'Drop frames here'}</h2>
        <p>
          {closed ??
            (share === null ? (
              <>
                PNG, TIFF, JPEG or WebP, 8 or 16 bit, up to 200 MB
                <br />
                or a line scan as CSV: position in mm, intensity
              </>
            ) : (
              shareText
            ))}
        </p>
        {share === null ? null : (
          <div
            role="progressbar"
            aria-label="All frames"
            aria-valuemin={0}
            aria-valuemax={100}
            aria-valuenow={Math.round(100 * share)}
            className="only-heard"
          />
        )}
        <span className="inline-flex gap-3">
          <ChooseFiles onFiles={onFiles} className={buttonClass()} disabled={closed !== null}>
            Choose frames
          </ChooseFiles>
          <span className="touch-only">
            <ChooseFiles camera onFiles={onFiles} className={buttonClass()} disabled={closed !== null}>
              Photograph
            </ChooseFiles>
          </span>
        </span>
      </div>
    </div>
  );
}
