"""The sign-off log: an append-only file of entries, each with the digest of the one before."""
