export { settings } from './settings.ts'
