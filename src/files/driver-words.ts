/** What each operation and reading is for, as an editor tells whoever writes a driver. */
export const operationWords: Readonly<Record<string, string>> = {
  'make-safe': 'Brings the instrument to where it can do no harm: input or output off, channels open.',
  'input-on': 'Lets the load draw its set current.',
  'input-off': 'Stops the load from drawing current.',
  'current-mode': 'The load holds a current.',
  'voltage-mode': 'The load holds a voltage.',
  'set-current': 'Sets the current; {amps} stands for it.',
  'set-voltage': 'Sets the voltage; {volts} stands for it.',
  'protect-current': 'Sets the current at which the instrument protects itself; {amps} stands for it.',
  'protect-voltage': 'Sets the voltage at which the instrument protects itself; {volts} stands for it.',
  'protect-power': 'Sets the power at which the instrument protects itself; {watts} stands for it.',
  'measure-voltage': 'Makes the meter measure dc voltage.',
  'measure-resistance': 'Makes the meter measure resistance.',
  'measure-temperature': 'Makes the meter measure temperature.',
  'close-channel': 'Connects one channel and no other; {channel} stands for its number.',
  'open-all': 'Opens every channel.',
  'output-on': 'Switches the output of the source on.',
  'output-off': 'Switches the output of the source off.',
};

export const readingWords: Readonly<Record<string, string>> = {
  voltage: 'How the voltage is asked for and read.',
  current: 'How the current is asked for and read.',
  power: 'How the power is asked for and read.',
  resistance: 'How the resistance is asked for and read.',
  temperature: 'How the temperature is asked for and read.',
  'input-state': 'How to ask whether the input is on.',
  'output-state': 'How to ask whether the output is on.',
  'measures-voltage': 'How to ask whether the meter is set to dc voltage.',
  'measures-resistance': 'How to ask whether the meter is set to resistance.',
  'closed-channel': 'How to ask which channel is closed.',
};
