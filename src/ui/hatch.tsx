/** Of what is gone: the pattern that `url(#id)` fills with. */
export function Hatch({ id, className }: { id: string; className: string }) {
  return (
    <defs>
      <pattern id={id} width="4" height="4" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
        <rect width="1.6" height="4" className={className} />
      </pattern>
    </defs>
  );
}
