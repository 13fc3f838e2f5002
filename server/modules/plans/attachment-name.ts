/**
 * The header that names a download. Programs that know only ASCII get a plain name, all others the
 * real one (RFC 6266; the encoding is RFC 8187).
 * @param name any text; may hold quotes, slashes or other scripts
 */
export function attachmentHeader(name: string): string {
  // Nothing that a file system forbids or reads as a folder.
  // eslint-disable-next-line no-control-regex
  const real = name.replace(/[\u0000-\u001f\u007f<>:"/\\|?*]+/g, '-').replace(/^[.\s]+/, '');
  const ascii = real
    .normalize('NFKD')
    .replace(/[^\x20-\x7e]+/g, '')
    .replace(/[%;']/g, '');
  // Half a surrogate pair is no text and cannot be encoded.
  const encoded = encodeURIComponent(real.replace(/\p{Surrogate}/gu, '')).replace(
    /['()*]/g,
    (letter) => `%${letter.charCodeAt(0).toString(16).toUpperCase()}`,
  );
  return `attachment; filename="${ascii.trim() || 'download'}"; filename*=UTF-8''${encoded}`;
}
