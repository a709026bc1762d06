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

const server = http.createServer((request, response) => {
  request.headers['x-forwarded-proto'] ??= 'http';
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
