export { putLimits as sendLimits } from '../feed/api.ts';
