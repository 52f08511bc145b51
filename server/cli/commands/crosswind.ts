import { conditionRemarks } from '#shared/analysis/condition-remarks.ts';
import { crosswindLimit } from '#shared/analysis/sideslip-crosswind.ts';
import { DEG, FT } from '#shared/units/constants.ts';
import { readAirframe } from '../airframe-file.ts';
import type { Command } from '../command.ts';
import { aircraftOption, knots, named, speedAndHeight } from '../condition.ts';
import { fixed, printJson, printText, remarkLines, table } from '../output.ts';

export const command: Command = {
  name: 'crosswind',
  usage: 'AIRFRAME.json --speed 70kt | --ias 70kt --height 0ft [--configuration NAME] [--json]',
  summary: 'Largest steady crosswind (true) from the right that a wing-down sideslip holds, with what binds.',
  positionals: ['AIRFRAME.json'],
  options: { speed: 'value', ias: 'value', height: 'value', configuration: 'value', json: 'flag' },
  async run(args) {
    const [file] = args.positionals;
    const json = args.flags.has('json');
    const airframe = await readAirframe(file, json);
    const aircraft = aircraftOption(args, airframe, file);
    const { tasMps, heightM } = speedAndHeight(args);
    const limit = named(file, () => crosswindLimit(aircraft, tasMps, heightM));
    const { controlPower, withinData } = limit;
    const remarks = remarkLines(conditionRemarks(aircraft, tasMps, heightM), json);
    if (json) {
      printJson({
        crosswind_kt: knots(controlPower.crosswindMps),
        crosswindWithinData_kt: knots(withinData.crosswindMps),
        limitedBy: limit.limitedBy,
        outsideData: limit.outsideData,
        beta_deg: controlPower.betaRad / DEG,
        bank_deg: controlPower.phiRad / DEG,
        aileron_deg: controlPower.aileronRad / DEG,
        rudder_deg: controlPower.rudderRad / DEG,
      });
      return 0;
    }
    const degrees = (rad: number) => `${fixed(rad / DEG, 1)}°`;
    const rows = [
      ['Crosswind within 15° of sideslip', `${fixed(knots(withinData.crosswindMps), 1)} kt`],
      [
        'Crosswind by control power',
        `${fixed(knots(controlPower.crosswindMps), 1)} kt${limit.outsideData ? ' (outside the data)' : ''}`,
      ],
      ['Limited by', limit.limitedBy],
      ['Sideslip', degrees(controlPower.betaRad)],
      ['Bank (into the wind)', degrees(controlPower.phiRad)],
      ['Aileron (rolls right positive)', degrees(controlPower.aileronRad)],
      ['Rudder (yaws left positive)', degrees(controlPower.rudderRad)],
      ['0.2 VS0 (14 CFR 23.233)', `${fixed(knots(limit.part23Mps), 1)} kt`],
      ['14 CFR 25.237(a)', `${fixed(knots(limit.part25Mps), 1)} kt`],
    ];
    printText([
      `${aircraft.name}, ${aircraft.configuration}, ${fixed(knots(tasMps), 1)} kt true, ${fixed(heightM / FT, 0)} ft; wind from the right, engine moments zero`,
      '',
      ...table(rows),
      ...remarks,
    ]);
    return 0;
  },
};
