/** The areas of the product, in the order of the day. Only what exists is shown. */
export interface Area {
  to: string;
  /** Key of the message that names it. */
  name: string;
  /** Addresses that belong to it. */
  holds: RegExp;
  signedOut?: boolean;
  /** Shown to those who may alone. */
  permission?: string;
  /** In the bar at the bottom of a phone; the others are found under "more". */
  onPhone: boolean;
}

export const AREAS: readonly Area[] = [
  { to: '/', name: 'frame.today', holds: /^\/$/, onPhone: true },
  {
    to: '/charge',
    name: 'frame.charge',
    // Charging a unit is charging, wherever it was opened from.
    holds: /^\/(charge|units\/[^/]+\/(charge|weigh-in))$/,
    onPhone: true,
    signedOut: true,
  },
  { to: '/units', name: 'frame.units', holds: /^\/(units|sites)(?!.*\/(charge|weigh-in)$)/, onPhone: false },
  { to: '/cylinders', name: 'frame.cylinders', holds: /^\/cylinders/, onPhone: true },
  { to: '/log', name: 'frame.log', holds: /^\/log/, onPhone: true },
  { to: '/books', name: 'frame.books', holds: /^\/books/, onPhone: false, permission: 'books:read' },
];

/** On a phone what has no place in the bar stands under "more". */
export const MORE =
  /^\/(more|units(?!.*\/(charge|weigh-in)$)|sites|books|people|tools|parties|exports|imports|preferences|choose-firm)/;
