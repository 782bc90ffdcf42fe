/** The hatch of what is silent. `id` is unique in the document. */
export function Hatch({ id, colour, step = 5 }: { id: string; colour: string; step?: number }) {
  return (
    <pattern id={id} width={step} height={step} patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
      <path d={`M0 0V${step}`} stroke={colour} strokeWidth="2" />
    </pattern>
  );
}
