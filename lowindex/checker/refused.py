"""The one exception of the checker."""


class Refused(Exception):
    """The witness does not prove its claim; the message says where and why in one line."""


def require(condition: object, reason: str) -> None:
    """Refuse unless the condition holds."""
    if not condition:
        raise Refused(reason)
