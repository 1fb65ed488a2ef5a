/**
 * Every published check that no test runs, with the reason. `tests/science/accounting.test.ts` holds that each id of
 * `reference/checks.json` is either run or listed here, and not both.
 */
export type NotImplemented = { computation: string; ids: readonly string[]; because: string }

export const notImplemented: readonly NotImplemented[] = [
  {
    computation: 'tc.astm_tolerance_C',
    ids: ['tc.e230.K'],
    because:
      'A probe’s class is kept by IEC 60584-1 alone; the American limits of error would be a second answer.',
  },
  {
    computation: 'wood.max_moisture_percent',
    ids: ['wood.mcmax.a'],
    because: 'Green wood is never toasted: seasoned staves lie far below it, and nothing shown asks for it.',
  },
  {
    computation: 'wood.shrinkage_percent',
    ids: ['wood.shrink.a'],
    because:
      'No screen or model uses shrinkage: the stave model keeps its thickness, and says that it is a model.',
  },
  {
    computation: 'spc.constants',
    ids: ['spc.constants.a'],
    because:
      'One firing is one value: charts are of individuals, which need d2 and D4 of two; control-chart.test.ts holds both.',
  },
  {
    computation: 'spc.xbar_r_limits',
    ids: ['spc.xbarr.montgomery'],
    because: 'One firing is one value: there are no subgroups to average.',
  },
  {
    computation: 'spc.xbar_s_limits',
    ids: ['spc.xbars.montgomery'],
    because: 'One firing is one value: there are no subgroups to average.',
  },
  {
    computation: 'colour.cie76',
    ids: ['colour.de76'],
    because: 'A colour difference is CIEDE2000 everywhere; a second measure would only contradict it.',
  },
  {
    computation: 'check_digit.luhn',
    ids: ['check.luhn.7992739871', 'check.luhn.411111111111111', 'check.luhn.123456789'],
    because: 'Serials carry the ISO 7064 MOD 37,36 character, which takes letters and catches more.',
  },
  {
    computation: 'check_digit.iso7064.mod11_2',
    ids: [
      'check.iso7064.mod11_2.0794',
      'check.iso7064.mod11_2.000000021825009',
      'check.iso7064.mod11_2.000000021694233',
      'check.iso7064.mod11_2.000000015109370',
    ],
    because: 'Serials carry MOD 37,36 alone.',
  },
  {
    computation: 'check_digit.iso7064.mod97_10',
    ids: [
      'check.iso7064.mod97_10.794',
      'check.iso7064.mod97_10.WEST12345698765432GB',
      'check.iso7064.mod97_10.2348231RF',
    ],
    because: 'Serials carry MOD 37,36 alone; no bank or payment reference is kept.',
  },
  {
    computation: 'check_digit.iso7064.mod11_10',
    ids: ['check.iso7064.mod11_10.0794'],
    because: 'Serials carry MOD 37,36 alone.',
  },
  {
    computation: 'check_digit.iso7064.mod37_2',
    ids: ['check.iso7064.mod37_2.G123489654321'],
    because: 'Serials carry MOD 37,36 alone, whose check character is a letter or a digit and never a star.',
  },
  {
    computation: 'check_digit.gs1.mod10',
    ids: [
      'check.gs1.mod10.629104150021',
      'check.gs1.mod10.03600029145',
      'check.gs1.mod10.400638133393',
      'check.gs1.mod10.7351353',
    ],
    because: 'Barrels carry the cooperage’s own serials, no trade item numbers.',
  },
  {
    computation: 'check_digit.verhoeff',
    ids: ['check.verhoeff.236', 'check.verhoeff.12345'],
    because: 'Serials carry MOD 37,36 alone.',
  },
  { computation: 'check_digit.damm', ids: ['check.damm.572'], because: 'Serials carry MOD 37,36 alone.' },
  {
    computation: 'code128.check',
    ids: ['code128.a', 'code128.b'],
    because:
      'Route cards carry a QR code; a scanner of any make types what it reads, so no bar code is drawn.',
  },
  {
    computation: 'qr.data_and_ec_codewords',
    ids: ['qr.rs'],
    because:
      'The symbol is the kept package qrcode’s own work; the product asks it for a picture, not for codewords.',
  },
  {
    computation: 'time.parse_to_utc',
    ids: ['time.rfc3339.a'],
    because:
      'Instants are read by zod’s and JavaScript’s own readers of ISO 8601; there is no reader of ours.',
  },
  {
    computation: 'time.iso_week',
    ids: ['time.isoweek.a', 'time.isoweek.b'],
    because: 'A due week is typed and kept as it is written; no week is computed.',
  },
  {
    computation: 'time.iso_duration_parse',
    ids: ['time.duration.valid'],
    because: 'Durations are typed and stored as minutes or seconds; no ISO 8601 duration is read.',
  },
  {
    computation: 'time.add_duration',
    ids: ['time.duration.add.a'],
    because: 'Durations are minutes or seconds, and adding them needs no calendar.',
  },
  {
    computation: 'csv.parse',
    ids: ['csv.parse.a', 'csv.parse.b', 'csv.parse.c'],
    because: 'No CSV file is read yet: that comes with the lab’s and the loggers’ import.',
  },
  {
    computation: 'csv.write_then_parse',
    ids: ['csv.write'],
    because:
      'An export defuses what a spreadsheet would take for a formula (=1+1), so by design it is no identity.',
  },
  {
    computation: 'crc16_modbus',
    ids: ['crc.modbus', 'crc.modbus.frame'],
    because: 'Frames are checked by the kept package modbus-serial; there is no computation of ours.',
  },
]
