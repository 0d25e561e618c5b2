/**
 * The table of refusals: every "no" this stand-in can say, with the code, status and opening words of the real service
 * (Amazon S3 API Reference, "Error responses"). Code refuses only by the name of a row, and each row has its own test,
 * so an answer that no test has seen cannot exist.
 */
export const REFUSALS = {
  // Who is asking
  'missing-authentication': { code: 'AccessDenied', status: 403, message: 'Access Denied' },
  'two-authentications': { code: 'InvalidArgument', status: 400, message: 'Only one auth mechanism allowed; only the X-Amz-Algorithm query parameter or the Authorization header should be specified' },
  'unsupported-mechanism': { code: 'InvalidRequest', status: 400, message: 'The authorization mechanism you have provided is not supported. Please use AWS4-HMAC-SHA256.' },
  'malformed-authorization': { code: 'AuthorizationHeaderMalformed', status: 400, message: 'The authorization header you provided is invalid.' },
  'wrong-header-scope': { code: 'AuthorizationHeaderMalformed', status: 400, message: 'The authorization header is malformed; the credential scope is wrong.' },
  'malformed-query-authorization': { code: 'AuthorizationQueryParametersError', status: 400, message: 'Query-string authentication version 4 requires the X-Amz-Algorithm, X-Amz-Credential, X-Amz-Signature, X-Amz-Date, X-Amz-SignedHeaders, and X-Amz-Expires parameters.' },
  'wrong-query-scope': { code: 'AuthorizationQueryParametersError', status: 400, message: 'Error parsing the X-Amz-Credential parameter; the credential scope is wrong.' },
  'expires-out-of-range': { code: 'AuthorizationQueryParametersError', status: 400, message: 'X-Amz-Expires must be a number of seconds from 1 to 604800 (a week).' },
  'unknown-access-key': { code: 'InvalidAccessKeyId', status: 403, message: 'The AWS Access Key Id you provided does not exist in our records.' },
  'session-token': { code: 'InvalidToken', status: 400, message: 'The provided token is malformed or otherwise invalid.' },
  'wrong-signature': { code: 'SignatureDoesNotMatch', status: 403, message: 'The request signature we calculated does not match the signature you provided. Check your key and signing method.' },
  'request-expired': { code: 'AccessDenied', status: 403, message: 'Request has expired' },
  'not-yet-valid': { code: 'AccessDenied', status: 403, message: 'Request is not valid yet' },
  'clock-skew': { code: 'RequestTimeTooSkewed', status: 403, message: 'The difference between the request time and the current time is too large.' },
  'missing-date': { code: 'AccessDenied', status: 403, message: 'AWS authentication requires a valid Date or x-amz-date header' },
  'headers-not-signed': { code: 'AccessDenied', status: 403, message: 'There were headers present in the request which were not signed' },

  // What the body says about itself
  'missing-content-sha256': { code: 'InvalidRequest', status: 400, message: 'Missing required header for this request: x-amz-content-sha256' },
  'invalid-content-sha256': { code: 'InvalidArgument', status: 400, message: 'x-amz-content-sha256 must be UNSIGNED-PAYLOAD or a valid sha256 value.' },
  'content-sha256-mismatch': { code: 'XAmzContentSHA256Mismatch', status: 400, message: 'The provided \'x-amz-content-sha256\' header does not match what was computed.' },
  'chunked-signing': { code: 'NotImplemented', status: 501, message: 'aws-chunked bodies (STREAMING-* payloads, trailers) are not spoken here: set requestChecksumCalculation to WHEN_REQUIRED, or add a decoder to fakes/storage/receive.ts.' },
  'invalid-checksum': { code: 'InvalidRequest', status: 400, message: 'Value for an x-amz-checksum header is invalid.' },
  'checksum-mismatch': { code: 'BadDigest', status: 400, message: 'The checksum you specified did not match the calculated checksum.' },
  'invalid-content-md5': { code: 'InvalidDigest', status: 400, message: 'The Content-MD5 you specified is not valid.' },
  'content-md5-mismatch': { code: 'BadDigest', status: 400, message: 'The Content-MD5 you specified did not match what we received.' },
  'missing-content-length': { code: 'MissingContentLength', status: 411, message: 'You must provide the Content-Length HTTP header.' },
  'entity-too-large': { code: 'EntityTooLarge', status: 400, message: 'Your proposed upload exceeds the maximum allowed size' },
  'message-too-long': { code: 'MaxMessageLengthExceeded', status: 400, message: 'Your request was too large.' },

  // What is asked for
  'invalid-uri': { code: 'InvalidURI', status: 400, message: 'Couldn\'t parse the specified URI.' },
  'key-too-long': { code: 'KeyTooLongError', status: 400, message: 'Your key is too long' },
  'metadata-too-large': { code: 'MetadataTooLarge', status: 400, message: 'Your metadata headers exceed the maximum allowed metadata size' },
  'no-such-bucket': { code: 'NoSuchBucket', status: 404, message: 'The specified bucket does not exist' },
  'no-such-key': { code: 'NoSuchKey', status: 404, message: 'The specified key does not exist.' },
  'invalid-range': { code: 'InvalidRange', status: 416, message: 'The requested range is not satisfiable' },
  'precondition-failed': { code: 'PreconditionFailed', status: 412, message: 'At least one of the pre-conditions you specified did not hold' },
  'invalid-listing-argument': { code: 'InvalidArgument', status: 400, message: 'Argument must be an integer between 0 and 2147483647' },
  'invalid-continuation-token': { code: 'InvalidArgument', status: 400, message: 'The continuation token provided is incorrect' },

  // Uploads in parts
  'no-such-upload': { code: 'NoSuchUpload', status: 404, message: 'The specified upload does not exist. The upload ID may be invalid, or the upload may have been aborted or completed.' },
  'invalid-part-number': { code: 'InvalidArgument', status: 400, message: 'Part number must be an integer between 1 and 10000, inclusive' },
  'invalid-part': { code: 'InvalidPart', status: 400, message: 'One or more of the specified parts could not be found. The part may not have been uploaded, or the specified entity tag may not match the part\'s entity tag.' },
  'invalid-part-order': { code: 'InvalidPartOrder', status: 400, message: 'The list of parts was not in ascending order. Parts must be ordered by part number.' },
  'part-too-small': { code: 'EntityTooSmall', status: 400, message: 'Your proposed upload is smaller than the minimum allowed size' },
  'malformed-xml': { code: 'MalformedXML', status: 400, message: 'The XML you provided was not well-formed or did not validate against our published schema' },

  // From a page of another origin
  'cors-incomplete': { code: 'BadRequest', status: 400, message: 'Insufficient information. Origin and Access-Control-Request-Method request headers needed.' },
  'cors-forbidden': { code: 'AccessForbidden', status: 403, message: 'CORSResponse: This CORS request is not allowed. This is usually because the evaluation of Origin, request method / Access-Control-Request-Method or Access-Control-Request-Headers are not whitelisted by the resource\'s CORS spec.' },

  // What this stand-in does not speak
  'operation-not-implemented': { code: 'NotImplemented', status: 501, message: 'Nothing in this product used this request when the stand-in was written: add a row to OPERATIONS in fakes/storage/operations.ts and a handler in fakes/storage/perform.ts.' },
  'parameter-not-implemented': { code: 'NotImplemented', status: 501, message: 'This query parameter is not understood for this operation: add it to the row in OPERATIONS of fakes/storage/operations.ts and obey it in the handler.' },
  'header-not-implemented': { code: 'NotImplemented', status: 501, message: 'This header would change what is stored or answered and is not understood: add it to KNOWN_AMZ_NAMES in fakes/storage/operations.ts and obey it in the handler.' },

  // The service itself
  'internal-error': { code: 'InternalError', status: 500, message: 'We encountered an internal error. Please try again.' },
  'slow-down': { code: 'SlowDown', status: 503, message: 'Please reduce your request rate.' },
} as const satisfies Record<string, { code: string, status: number, message: string }>

export type RefusalName = keyof typeof REFUSALS

/** A "no" on its way to the client. `fields` become extra elements of the error document, as the service adds them. */
export class Refusal extends Error {
  constructor(
    readonly row: RefusalName,
    detail = '',
    readonly fields: Readonly<Record<string, string>> = {},
  ) {
    super(detail === '' ? REFUSALS[row].message : `${REFUSALS[row].message} (${detail})`)
    this.name = 'Refusal'
  }

  get code(): string {
    return REFUSALS[this.row].code
  }

  get status(): number {
    return REFUSALS[this.row].status
  }
}
