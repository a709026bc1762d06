import { escapeHtml, oneLine } from './markup';

/** A rendered message; text and HTML say the same. */
export interface Message {
  readonly subject: string;
  readonly text: string;
  readonly html: string;
}

/** What a message consists of, before it is rendered. */
export interface MessageParts {
  readonly subject: string;
  readonly greeting: string;
  readonly paragraphs: readonly string[];
  readonly action: Readonly<{ label: string; href: string }>;
  /** After the link: how long it works, and what to do when it was not asked for. */
  readonly footnotes: readonly string[];
}

/** Colours as literals: mail programs know no variables. Those of the light theme. */
const ink = '#1E2A2F';
const quiet = '#5A676D';
const paper = '#FAF8F3';
const accent = '#0F6B74';

/** Renders a message as plain text and as simple HTML that needs nothing from any other host. */
export function renderMessage(parts: MessageParts): Message {
  const text = [
    parts.greeting,
    ...parts.paragraphs,
    `${parts.action.label}:\n${parts.action.href}`,
    ...parts.footnotes,
    'Headwater'
  ].join('\n\n');
  const paragraph = (line: string, style = '') =>
    `<p style="margin:0 0 16px;${style}">${escapeHtml(line)}</p>`;
  const href = escapeHtml(parts.action.href);
  const html = `<!doctype html>
<html lang="en">
<head><meta charset="utf-8"><title>${escapeHtml(oneLine(parts.subject))}</title></head>
<body style="margin:0;background:${paper};color:${ink};font:16px/1.5 Georgia,serif">
<div style="max-width:36em;margin:0 auto;padding:32px 20px">
${paragraph(parts.greeting)}
${parts.paragraphs.map((line) => paragraph(line)).join('\n')}
<p style="margin:24px 0"><a href="${href}" style="display:inline-block;background:${accent};color:#FFFFFF;padding:10px 18px;border-radius:4px;text-decoration:none">${escapeHtml(parts.action.label)}</a></p>
<p style="margin:0 0 16px;color:${quiet};font-size:14px">Or copy this address into the browser:<br><a href="${href}" style="color:${accent};word-break:break-all">${href}</a></p>
${parts.footnotes.map((line) => paragraph(line, `color:${quiet};font-size:14px`)).join('\n')}
<p style="margin:24px 0 0;color:${quiet};font-size:14px">Headwater</p>
</div>
</body>
</html>
`;
  return { subject: oneLine(parts.subject), text: `${text}\n`, html };
}
