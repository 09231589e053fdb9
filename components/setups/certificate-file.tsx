'use client';

import { useRef, useState } from 'react';
import { Button } from '@/components/ui/button';
import { sendCertificate } from '@/lib/client/send-certificate';
import type { CertificateLink } from '@/lib/domain/views';

interface Props {
  /** Whose certificate it is, for those who hear the page. */
  of: string;
  file: CertificateLink | null;
  error?: string;
  onChange: (file: CertificateLink | null) => void;
}

/** The certificate itself: sent when it is chosen, kept under its own hash, named by the value. */
export function CertificateFileField({ of, file, error, onChange }: Props) {
  const input = useRef<HTMLInputElement>(null);
  const [waiting, setWaiting] = useState(false);
  const [problem, setProblem] = useState('');
  const send = async (chosen: File) => {
    setWaiting(true);
    setProblem('');
    const answer = await sendCertificate(chosen);
    setWaiting(false);
    if (answer.ok) onChange(answer.file);
    else setProblem(answer.message);
  };
  const wrong = problem || error;
  return (
    <div className="min-w-0" role="group" aria-label={`Certificate file, ${of}`}>
      <span className="label">Certificate file</span>
      <div className="flex flex-wrap items-center gap-x-3">
        {file ? <CertificateName file={file} /> : null}
        <Button kind={file ? 'quiet' : 'plain'} busy={waiting} onClick={() => input.current?.click()}>
          {file ? 'Replace' : 'Add the file'}
        </Button>
        {file ? (
          <Button kind="quiet" onClick={() => onChange(null)}>
            Take off
          </Button>
        ) : null}
      </div>
      <input
        ref={input}
        type="file"
        hidden
        aria-label={`File of the certificate, ${of}`}
        accept="application/pdf,image/png,image/jpeg"
        onChange={(event) => {
          const chosen = event.target.files?.[0];
          event.target.value = '';
          if (chosen) void send(chosen);
        }}
      />
      {wrong ? (
        <p className="help wrong" role="alert">
          {wrong}
        </p>
      ) : (
        <p className="help">PDF, PNG or JPEG, up to 20 MB</p>
      )}
    </div>
  );
}

/** A certificate's name as the link that downloads it. */
export function CertificateName({ file }: { file: CertificateLink }) {
  return (
    <a
      className="link min-w-0 break-words"
      href={`/api/certificates/${file.sha256}`}
      download={file.fileName}
    >
      {file.fileName}
    </a>
  );
}
