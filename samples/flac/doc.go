// Package flac decodes a FLAC file (RFC 9639) to raw samples through a
// general-purpose library. Around it stand the checks that an untrusted file
// needs: every frame agrees with the stream's header, samples keep to their
// range, the output is bounded by the file's size, the checksum of the decoded
// audio is compared, and whatever goes wrong inside becomes an error with the
// byte where it did.
package flac
