import bcrypt from 'bcryptjs';
import { defineTask } from '../task.ts';

export interface VerifyPasswordInput {
  password: string;
  hash: string;
}
export interface VerifyPasswordOutput {
  matches: boolean;
}

export default defineTask<VerifyPasswordInput, VerifyPasswordOutput>(({ password, hash }) => ({
  matches: bcrypt.compareSync(password, hash),
}));
