export {
	examineReport,
	maxFileBytes,
	verifyReport,
	type Examination,
	type VerificationOptions
} from './verify-report';
export * from './types';
