import { describe, expect, test } from 'vitest'
import { trackGeoJson } from '../../src/exchange/geoJson.ts'
import { trackGpx } from '../../src/exchange/gpx.ts'
import { trackKml } from '../../src/exchange/kml.ts'
import { lines, type TrackFile } from '../../src/exchange/trackFile.ts'
import { packTrack, unpackTrack, type TrackRow } from '../../src/exchange/trackRow.ts'
import { type TrackPoint } from '../../src/physics/track.ts'

const DEGREE = Math.PI / 180

const row = (longitudeDeg: number, phase: TrackRow['phase'] = 'ascent', more = {}): TrackRow => ({
  elapsedS: 0,
  time: '2026-12-05T09:00:00.000Z',
  latitudeDeg: 10,
  longitudeDeg,
  altitudeM: 1000,
  verticalSpeedMs: 5,
  windFromDeg: 270,
  windSpeedMs: 10,
  phase,
  ...more,
})

describe('a track over the antimeridian', () => {
  const rows = [
    row(179.8),
    row(-179.9, 'burst', { altitudeM: 4000 }),
    row(-179.5, 'landing', { latitudeDeg: 11 }),
  ]
  const file: TrackFile = { title: 'T', runId: 'r', cautions: ['Mind.'], rows }

  test('is cut on the meridian, both parts ending on it (RFC 7946, section 3.1.9)', () => {
    expect(lines(rows.slice(0, 2))).toEqual([
      [
        [179.8, 10, 1000],
        [180, 10, expect.closeTo(3000, 6) as number],
      ],
      [
        [-180, 10, expect.closeTo(3000, 6) as number],
        [-179.9, 10, 4000],
      ],
    ])
    const [first] = lines([row(-179.9), row(179.8)])
    expect(first.at(-1)?.[0]).toBe(-180)
  })

  test('is a MultiLineString in GeoJSON and two LineStrings in KML', () => {
    const { features } = JSON.parse(trackGeoJson(file)) as { features: { geometry: object }[] }
    expect(features[0].geometry).toMatchObject({ type: 'MultiLineString' })
    expect(features[1].geometry).toMatchObject({ type: 'LineString' })
    expect(trackKml(file).match(/<LineString>/g)).toHaveLength(3)
  })
})

test('a title that XML cannot hold is made fit', () => {
  const file: TrackFile = {
    title: 'a\u0000b\u001f <&> ]]>',
    runId: 'r',
    cautions: [],
    rows: [row(1), row(2, 'burst'), row(3, 'landing')],
  }
  for (const xml of [trackKml(file), trackGpx(file)]) {
    expect(xml).toContain('a\uFFFDb\uFFFD &lt;&amp;&gt;')
    expect(xml).not.toContain('\u0000')
  }
})

test('a packed track is the track to the last digit answered', () => {
  const point: TrackPoint = {
    elapsed: 1234.5678,
    latitude: -47.123456789 * DEGREE,
    longitude: -179.99999999 * DEGREE,
    altitude: 31_234.5678,
    verticalSpeed: -47.6543,
    windEast: -3,
    windNorth: 0,
    phase: 'descent',
  }
  const [unpacked] = unpackTrack(packTrack([point]), 1_000_000)
  expect(unpacked).toEqual({
    elapsedS: 1234.568,
    time: '1970-01-12T14:07:14.568Z',
    latitudeDeg: -47.1234568,
    longitudeDeg: -180,
    altitudeM: 31_234.568,
    verticalSpeedMs: -47.654,
    windFromDeg: 90,
    windSpeedMs: 3,
    phase: 'descent',
  })
})

test('a wind from just west of north is from 0°, never from 360°', () => {
  const point: TrackPoint = {
    elapsed: 0,
    latitude: 0,
    longitude: 0,
    altitude: 0,
    verticalSpeed: 0,
    windEast: 1e-5,
    windNorth: -1,
    phase: 'ascent',
  }
  expect(unpackTrack(packTrack([point]), 0)[0].windFromDeg).toBe(0)
})
