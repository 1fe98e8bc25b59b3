import type { CheckRequest } from '#shared/contracts/check.ts'

/** A small rig by the sea: 185 cfm at 100 psi, 50 ft of 1 1/4 in hose, a new No. 4, 90 psi wanted. */
export function makeCheckRequest(overrides: Partial<CheckRequest> = {}): CheckRequest {
  return {
    site: { altitudeM: 0, airTemperatureC: 20 },
    compressor: { ratedFreeAirM3Min: 5.24, setPressureKpa: 690, unloadPressureKpa: 830 },
    airLine: [{ name: 'air hose', insideDiameterMm: 31.75, lengthM: 15 }],
    outlets: [
      { line: [{ name: 'blast hose', insideDiameterMm: 31.75, lengthM: 15 }], nozzle: { boreMm: 6.35 } },
    ],
    airTakenFirst: [],
    targetNozzlePressureKpa: 620,
    ...overrides,
  }
}
