import type { LoadHands } from './dialect.js';
import { booleanSetting, numberSetting, question, type ScpiCommand, wordSetting } from './scpi-commands.js';
import { nr3 } from './scpi-number.js';

/** What a load is told and asked in the standard subsystems, with or without SOURce before the set-points. */
export function loadCommands(hands: LoadHands): readonly ScpiCommand[] {
  return [
    booleanSetting(
      'INPut[:STATe]',
      () => hands.state().input === 'on',
      (on) => {
        hands.set({ input: on ? 'on' : 'off' });
      },
    ),
    wordSetting(
      '[SOURce:]FUNCtion[:MODE]',
      new Map([
        ['CURRent', 'current'],
        ['VOLTage', 'voltage'],
      ] as const),
      () => hands.state().mode,
      (mode) => {
        hands.set({ mode });
      },
    ),
    numberSetting(
      '[SOURce:]CURRent[:LEVel][:IMMediate][:AMPLitude]',
      { unit: 'A', least: 0, most: hands.most.current },
      () => hands.state().setCurrent,
      (setCurrent) => {
        hands.set({ setCurrent });
      },
    ),
    numberSetting(
      '[SOURce:]VOLTage[:LEVel][:IMMediate][:AMPLitude]',
      { unit: 'V', least: 0, most: hands.most.voltage },
      () => hands.state().setVoltage,
      (setVoltage) => {
        hands.set({ setVoltage });
      },
    ),
    protection(hands, 'CURRent', { unit: 'A', least: 0, most: 1.1 * hands.most.current }, 'current'),
    protection(hands, 'VOLTage', { unit: 'V', least: 0, most: 1.1 * hands.most.voltage }, 'voltage'),
    protection(
      hands,
      'POWer',
      { unit: 'W', least: 0, most: hands.most.current * hands.most.voltage },
      'power',
    ),
    question('MEASure[:SCALar]:VOLTage[:DC]', () => nr3(hands.measure('voltage')), 2),
    question('MEASure[:SCALar]:CURRent[:DC]', () => nr3(hands.measure('current')), 2),
    question('MEASure[:SCALar]:POWer[:DC]', () => nr3(hands.measure('power')), 2),
  ];
}

function protection(
  hands: LoadHands,
  node: string,
  range: Parameters<typeof numberSetting>[1],
  quantity: 'current' | 'voltage' | 'power',
): ReturnType<typeof numberSetting> {
  return numberSetting(
    `[SOURce:]${node}:PROTection[:LEVel]`,
    range,
    () => hands.state().protection[quantity] ?? range.most,
    (value) => {
      hands.set({ protection: { ...hands.state().protection, [quantity]: value } });
    },
  );
}
