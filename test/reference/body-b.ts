/** Body B of the check values: an LDPE film tube. */
export const BODY_B = { radius: 0.04, wall: 50e-6, E: 200e6, G: 70e6 };
export const PRESSURE_B = 10e3;
export const YIELD_B = 1.5e3;
