"""The sign-off log: an append-only file of entries, each with the digest of the one before."""

ACTIONS = ("audited", "responded", "waived", "checked", "approved", "withdrawn")
