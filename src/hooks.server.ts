import { building } from '$app/environment';
import type { ServerInit } from '@sveltejs/kit';
import { sequence } from '@sveltejs/kit/hooks';
import { authentication } from '$lib/server/hooks/authentication';
import { coverEveryAnswer } from '$lib/server/hooks/every-answer';
import { reportError } from '$lib/server/hooks/errors';
import { guard } from '$lib/server/hooks/guard';
import { redirectToOrigin } from '$lib/server/hooks/loopback';
import { requestId } from '$lib/server/hooks/request-id';
import { sameOrigin } from '$lib/server/hooks/same-origin';
import { securityHeaders } from '$lib/server/hooks/security-headers';
import { sight } from '$lib/server/hooks/sight';

export const init: ServerInit = () => {
	if (!building) coverEveryAnswer();
};

export const handle = sequence(
	requestId,
	securityHeaders,
	redirectToOrigin,
	sameOrigin,
	authentication,
	guard,
	sight
);

export const handleError = reportError;
