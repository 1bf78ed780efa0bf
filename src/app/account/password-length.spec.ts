import { PASSWORD_MAX_BYTES, PASSWORD_MIN_CHARACTERS } from '#shared/contract/http/accounts';
import { PASSWORD_LENGTH } from './password-length';

it('says the same as the contract', () => {
  expect(PASSWORD_LENGTH).toEqual({ least: PASSWORD_MIN_CHARACTERS, mostBytes: PASSWORD_MAX_BYTES });
});
