import {
  figure,
  humidityWords,
  shareWords,
  temperature,
  temperatureDifference,
  temperatureFigure,
  typedCelsius,
} from './measure-words';

describe('figures in words', () => {
  // 25 °C = 77 °F and −40 °C = −40 °F by the definition of the scales.
  it('turns temperatures and differences into the unit of the person', () => {
    expect(temperature(25, 'C')).toBe('25.0\u00a0°C');
    expect(temperature(25, 'F')).toBe('77.0\u00a0°F');
    expect(temperatureFigure(-40, 'F', 0)).toBe('−40');
    expect(temperatureDifference(2, 'F')).toBe('3.6\u00a0°F');
    expect(typedCelsius(77, 'F')).toBe(25);
    expect(typedCelsius(21.5, 'C')).toBe(21.5);
  });

  it('writes a true minus and never a negative zero', () => {
    expect(figure(-3.14, 1)).toBe('−3.1');
    expect(figure(-0.04, 1)).toBe('0.0');
  });

  it('writes shares and humidity in per cent', () => {
    expect(humidityWords(51.4)).toBe('51\u00a0%');
    expect(shareWords(0.934)).toBe('93\u00a0%');
  });
});
