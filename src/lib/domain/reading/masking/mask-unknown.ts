import { maskStatement } from '../mask-literals';
import { maskSecrets } from '../secrets';
import { maskTextPlan } from './mask-text-plan';

/**
 * Text in no known format, masked as well as can be told: SQL as SQL, everything else by quoted strings and the
 * shapes of secrets.
 */
export function maskUnknown(text: string): string {
	if (/^\s*[[{<]/.test(text)) return maskSecrets(text.replace(/'(?:[^'"\\\n]|'')*'/g, '?'));
	if (/^\s*(?:explain|select|with|insert|update|delete|merge)\b/i.test(text))
		return maskSecrets(maskStatement(text));
	return maskTextPlan(text);
}
