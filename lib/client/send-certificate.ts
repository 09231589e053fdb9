import type { CertificateLink } from '@/lib/domain/views';

export type CertificateAnswer = { ok: true; file: CertificateLink } | { ok: false; message: string };

/** Sends a certificate's file to be kept, or answers the sentence why it was not. */
export async function sendCertificate(file: File): Promise<CertificateAnswer> {
  try {
    const response = await fetch(`/api/certificates?${new URLSearchParams({ name: file.name })}`, {
      method: 'POST',
      body: file,
      headers: { 'content-type': 'application/octet-stream' },
    });
    const body = (await response.json()) as CertificateLink & { title?: string };
    if (response.ok) return { ok: true, file: body };
    return { ok: false, message: body.title ?? 'The service did not answer as it should.' };
  } catch (problem) {
    if (!(problem instanceof TypeError || problem instanceof SyntaxError)) throw problem;
    return {
      ok: false,
      message: 'The service could not be reached. Choose the file again when the network is back.',
    };
  }
}
