"""Errors with a code, a rule and the offending value.

A user's mistake becomes a sentence; an author's mistake raises with name, rule and value; anything else is a bug.
"""

from __future__ import annotations


class StraylineError(Exception):
    """Base of every error of ours: a permanent `code`, a plain sentence, and details (JSON values only)."""

    code = "strayline"

    def __init__(self, message: str, **details: object) -> None:
        super().__init__(message)
        self.message = message
        self.details = details


class CaseError(StraylineError):
    """A case file or installation breaks a rule: `where` is the key path, `rule` a sentence, `value` what stood there."""

    code = "case"

    def __init__(self, where: str, rule: str, value: object = None, *, file: str = "", **details: object) -> None:
        self.where, self.rule, self.value, self.file = where, rule, value, file
        shown = repr(value) if isinstance(value, str) else str(value)
        if len(shown) > 80:
            shown = shown[:77] + "..."
        prefix = f"{file}: " if file else ""
        suffix = "" if value is None else f" ({shown})"
        super().__init__(f"{prefix}{where}: {rule}{suffix}", where=where, rule=rule, **details)

    def in_file(self, file: str) -> CaseError:
        """The same error, naming the file it was found in."""
        return CaseError(self.where, self.rule, self.value, file=file)


class NetworkError(StraylineError):
    """A network that breaks a consistency rule or has no solution, told as a circuit fact."""

    code = "network"


class RequestError(StraylineError):
    """A worker request that is not of the protocol's form."""

    code = "request"
