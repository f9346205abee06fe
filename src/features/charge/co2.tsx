import { Fragment } from 'react';

/** The subscript is a real one: none of the shipped faces holds the sign U+2082. */
export function Co2() {
  return (
    <>
      CO<sub>2</sub>
    </>
  );
}

/** A sentence of the catalogue, in which CO2 is written on one line. */
export function WithCo2({ text }: { text: string }) {
  return text.split('CO2').map((part, index) => (
    // biome-ignore lint/suspicious/noArrayIndexKey: the parts of one sentence, in their order
    <Fragment key={index}>
      {index > 0 ? <Co2 /> : null}
      {part}
    </Fragment>
  ));
}
