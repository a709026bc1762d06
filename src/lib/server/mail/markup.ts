const entities: Readonly<Record<string, string>> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;'
};

/** Text made safe inside HTML and inside quoted attributes. */
export function escapeHtml(text: string): string {
  return text.replace(/[&<>"']/g, (sign) => entities[sign] ?? sign);
}

/** Text in one line, for subjects and names inside sentences. */
export function oneLine(text: string): string {
  return text.replace(/\s+/g, ' ').trim();
}
