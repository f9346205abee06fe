/** The areas of the product, in the order of the day. Only what exists is shown. */
export interface Area {
  to: string;
  /** Key of the message that names it. */
  name: string;
  signedOut?: boolean;
  /** In the bar at the bottom of a phone; the others are found under "more". */
  onPhone: boolean;
}

export const AREAS: readonly Area[] = [
  { to: '/', name: 'frame.today', onPhone: true },
  { to: '/charge', name: 'frame.charge', onPhone: true, signedOut: true },
  { to: '/units', name: 'frame.units', onPhone: false },
  { to: '/cylinders', name: 'frame.cylinders', onPhone: true },
  { to: '/log', name: 'frame.log', onPhone: true },
];
