import http from 'node:http';

/*
 * The web server around the build. It exists so that forms work on every address the server is reached under
 * (127.0.0.1, localhost, a name on the network): the adapter by itself assumes https unless ORIGIN is fixed.
 */
process.env.NODE_ENV ??= 'production';
process.env.HEADWATER_PROCESS = 'web';
process.env.HEADWATER_BUILT = 'yes';
if (process.env.ORIGIN === '') delete process.env.ORIGIN;
if (!process.env.ORIGIN) {
  process.env.PROTOCOL_HEADER = 'x-forwarded-proto';
  process.env.HOST_HEADER = 'host';
}
// A little more than the largest upload, for what surrounds it in the request.
process.env.BODY_SIZE_LIMIT ??= `${Number(process.env.UPLOAD_LIMIT_MB || 64) + 1}M`;

const { handler } = await import('../build/handler.js');
const host = process.env.HOST || '127.0.0.1';
const port = Number(process.env.PORT || 3000);

/**
 * A program sends no Origin with a form, and no cookie that a page of another site could abuse; a browser sends an access key
 * only where our own pages ask it to. Such requests to the API are taken as ours, so that it can answer them.
 * @param {http.IncomingMessage} request
 */
function isFromProgram({ url = '', headers }) {
  const hasKey = /^bearer\b/i.test(headers.authorization ?? '');
  return (
    url.startsWith('/api/v1/') && headers.origin === undefined && (hasKey || headers.cookie === undefined)
  );
}

const server = http.createServer((request, response) => {
  request.headers['x-forwarded-proto'] ??= 'http';
  if (isFromProgram(request)) {
    const { 'x-forwarded-proto': protocol, host } = request.headers;
    request.headers.origin = process.env.ORIGIN || `${protocol}://${host}`;
  }
  handler(request, response, () => {
    response.statusCode = 404;
    response.end();
  });
});

server.on('error', (error) => {
  process.send?.({ listenProblem: error.code });
  console.error(`The server cannot listen on ${host}, port ${port} (${error.code}).`);
  process.exit(1);
});
server.listen({ host, port }, () => process.send?.('ready'));

let closing = false;
function close(reason) {
  if (closing) return;
  closing = true;
  server.close(async () => {
    // What the application closes is in its shutdown registry; it answers with a promise.
    const waiting = [];
    process.emit('sveltekit:shutdown', reason, (promise) => waiting.push(promise));
    await Promise.allSettled(waiting);
    process.exit();
  });
  server.closeIdleConnections();
  // Answers that are under way may end; kept-open connections may not hold the rest up.
  const idle = setInterval(() => server.closeIdleConnections(), 200);
  idle.unref();
  setTimeout(() => server.closeAllConnections(), 8000).unref();
}
process.on('SIGTERM', () => close('SIGTERM'));
process.on('SIGINT', () => close('SIGINT'));
process.on('disconnect', () => close('the parent process is gone'));
