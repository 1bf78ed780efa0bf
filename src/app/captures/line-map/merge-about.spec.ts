import { mergeAbout } from './merge-about';

it('gives each capture what was filled in, and leaves it the rest', () => {
  const known = { subject: 'Cold start', cable: '2 m', operator: 'Ines' };
  expect(mergeAbout(known, { subject: 'All', cable: '15 m', operator: '', temperatureC: null })).toEqual({
    subject: 'Cold start',
    cable: '15 m',
    operator: 'Ines',
  });
});
