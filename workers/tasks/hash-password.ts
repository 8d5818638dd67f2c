import bcrypt from 'bcryptjs';
import { defineTask } from '../task.ts';

export interface HashPasswordInput {
  password: string;
}
export interface HashPasswordOutput {
  hash: string;
}

/** Some 0.3 s a guess on the machines of this decade. */
const COST = 12;

export default defineTask<HashPasswordInput, HashPasswordOutput>(({ password }) => ({
  hash: bcrypt.hashSync(password, COST),
}));
