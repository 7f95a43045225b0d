/** Names of fields as the forms say them, by their last key. */
const fieldWords: Record<string, string> = {
  code: 'code', name: 'name', ownerName: 'owner', lastCheckedOn: 'last checked', isArchived: 'archived',
  kind: 'kind', position: 'position', waterId: 'water', channel: 'place on the river', reachId: 'reach', chainageKm: 'chainage (km)', bank: 'bank',
  depthsM: 'draw-off depths (m)', closingMinutes: 'time to close (min)', storageHours: 'storage (h)', peopleServed: 'people served', contact: 'contact', phone: 'phone', email: 'e-mail',
  actionValues: 'action value', substanceId: 'substance', value: 'value', unit: 'unit', basis: 'basis', averagingMinutes: 'averaging (min)', averaging: 'averaging', source: 'source', note: 'note',
  drainPath: 'way to the water', operator: 'operator', holdings: 'holding', largestCredible: 'largest credible quantity', strengthNote: 'strength',
  otherNames: 'other names', cas: 'CAS number', unNumber: 'UN number', measure: 'measure', form: 'form', activeFraction: 'active fraction (kg/kg)', productDensityKgM3: 'product density (kg/m³)', solubilityKgM3: 'solubility (kg/m³)',
  loss: 'loss', ratePerS: 'rate (1/s)', dayRatePerS: 'rate by day (1/s)', nightRatePerS: 'rate by night (1/s)', sunriseHour: 'sunrise (h)', sunsetHour: 'sunset (h)', hazards: 'hazards', publishedValues: 'published value', use: 'use', sheetSource: 'source of the properties',
  access: 'access', chainageOrigin: 'chainage origin', flowNames: 'named flows', reaches: 'reach', chainagePrefix: 'chainage letters', centreline: 'centreline', downstreamReachId: 'flows into', joinsOnBank: 'joins on', slope: 'slope (m/m)', manningN: 'Manning n', hydraulics: 'flow row', flowName: 'flow', exceededPercent: 'exceeded (%)',
  dischargeM3s: 'discharge (m³/s)', widthM: 'width (m)', depthM: 'depth (m)', velocityMps: 'velocity (m/s)', dispersionM2s: 'dispersion along (m²/s)', transverseM2s: 'mixing across (m²/s)', coefficientNote: 'note on coefficients', calibrated: 'calibrated', tidal: 'tidal',
  area: 'outline', mixingDepthM: 'mixing depth (m)', currents: 'state of the current', parts: 'part', tide: 'tide', mixing: 'mixing', alongM2s: 'mixing along (m²/s)', acrossM2s: 'mixing across (m²/s)', turnsWithCurrent: 'turns with the current', axisTowardDeg: 'axis toward (°)', varianceFactor: 'variance factor',
  speedMps: 'speed (m/s)', towardDeg: 'toward (°)', majorMps: 'strongest (m/s)', minorMps: 'minor axis (m/s)', floodTowardDeg: 'flood toward (°)', periodS: 'period (s)', maxFloodS: 'strongest flood after T0 (s)', windSpeedMps: 'wind (m/s)', windFromDeg: 'wind from (°)', driftFraction: 'drift fraction', turnDeg: 'turn (°)',
};

/** A path in plain words: data.reaches.0.hydraulics.1.depthM is "reach 1, flow row 2, depth (m)". */
export function pathWords(path: string): string {
  const words: string[] = [];
  for (const key of path.split('.')) {
    if (key === 'data') continue;
    if (/^\d+$/.test(key) && words.length > 0) words[words.length - 1] += ` ${Number(key) + 1}`;
    else words.push(fieldWords[key] ?? key);
  }
  const text = words.join(', ');
  return text.charAt(0).toUpperCase() + text.slice(1);
}
