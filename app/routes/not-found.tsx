/** Every address no other route has: answered like a record that is not there, in the frame and theme of the rest. */
export function loader() {
  throw new Response(null, { status: 404, statusText: 'Not found' });
}

export default function NotFound() {
  return null;
}
