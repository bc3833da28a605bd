/** Answers as long as the process does; whether it can work is asked at /readyz. */
export function GET(): Response {
  return new Response('ok\n');
}
