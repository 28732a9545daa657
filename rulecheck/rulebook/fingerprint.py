"""Fingerprints: what a finding is, without where its card stands.

Renumbered lines and reordered cards change no fingerprint; another rule or subject does.
"""

import hashlib

_LENGTH = 16


def fingerprint_of(rule: str, kind: str, subject: str) -> str:
    """Sixteen hexadecimal digits of SHA-256 over rule, kind and name, separated by newlines."""
    text = "\n".join((rule, kind, subject.casefold()))
    return hashlib.sha256(text.encode("utf-8")).hexdigest()[:_LENGTH]
