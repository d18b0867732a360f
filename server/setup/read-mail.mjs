/**
 * A mail as far as the sink shows it. It reads what nodemailer writes: one level of parts, quoted-printable or base64.
 * @typedef {{ from: string, to: string, subject: string, messageId: string, text: string, html: string }} ReadMail
 */

/**
 * @param {string} source the whole mail as it came over SMTP
 * @returns {ReadMail}
 */
export function readMail(source) {
  const { headers, body } = splitHead(source);
  const parts = splitParts(headers.get('content-type') ?? '', body).map(splitHead);
  const bodyOf = (type) => {
    const part = parts.find((one) => (one.headers.get('content-type') ?? 'text/plain').startsWith(type));
    return part === undefined ? '' : decodeBody(part);
  };
  const header = (name) => decodeWords(headers.get(name) ?? '');
  return {
    from: header('from'),
    to: header('to'),
    subject: header('subject'),
    messageId: header('message-id'),
    text: bodyOf('text/plain'),
    html: bodyOf('text/html'),
  };
}

function splitHead(source) {
  const end = source.indexOf('\r\n\r\n');
  const lines = source
    .slice(0, end)
    .replace(/\r\n[ \t]+/g, ' ')
    .split('\r\n');
  const headers = new Map(
    lines.map((line) => [
      line.slice(0, line.indexOf(':')).toLowerCase(),
      line.slice(line.indexOf(':') + 1).trim(),
    ]),
  );
  return { headers, body: source.slice(end + 4) };
}

function splitParts(contentType, body) {
  const boundary = /^multipart\/.*boundary="?([^";]+)"?/.exec(contentType)?.[1];
  if (boundary === undefined) return [`Content-Type: ${contentType}\r\n\r\n${body}`];
  return body
    .split(`--${boundary}`)
    .slice(1, -1)
    .map((part) => part.replace(/^\r\n|\r\n$/g, ''));
}

function decodeBody({ headers, body }) {
  const encoding = headers.get('content-transfer-encoding')?.toLowerCase();
  const text =
    encoding === 'base64'
      ? Buffer.from(body, 'base64').toString('utf8')
      : encoding === 'quoted-printable'
        ? decodeQuoted(body.replace(/=\r\n/g, ''))
        : body;
  return text.replaceAll('\r\n', '\n');
}

function decodeQuoted(text) {
  const bytes = text.replace(/=([0-9A-F]{2})/gi, (_, hex) => String.fromCharCode(Number.parseInt(hex, 16)));
  return Buffer.from(bytes, 'latin1').toString('utf8');
}

/** Words of a header outside ASCII: RFC 2047. */
function decodeWords(text) {
  return text
    .replace(/\?=\s+=\?/g, '?==?')
    .replace(/=\?utf-8\?([qb])\?([^?]*)\?=/gi, (_, kind, word) =>
      kind.toLowerCase() === 'b'
        ? Buffer.from(word, 'base64').toString('utf8')
        : decodeQuoted(word.replaceAll('_', ' ')),
    );
}
