import { Link } from 'react-router-dom';
import type { RegisterName } from '../../../../shared/schemas/registers';
import { registerWords } from '../model/register-words';

/** Back to the register this page belongs to. */
export const RegisterLink = ({ register }: { register: RegisterName }) => <Link to={`/${register}`}>{registerWords[register].title}</Link>;
