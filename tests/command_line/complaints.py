"""What a refusal of the program must look like."""

from __future__ import annotations

import re

from tests.command_line.program import Outcome

_LONGEST = 1500  # characters: fits on one screen, whatever the input was
_PLACE = r"(?:^|[:,] )(?:\w+\.)*{key}(?:\.\w+)*: "


def assert_names(text: str, key: str) -> None:
    """Assert that a message names the key in its place, or the syntax where that is at fault."""
    if key == "TOML":
        assert "not valid TOML" in text
    else:
        assert re.search(_PLACE.format(key=key), text), f"{key} is not named: {text}"


def assert_refused(outcome: Outcome, key: str, *, file: str = "", hint: str | None = None) -> None:
    """Assert exit code 2 and one short message that names the key in its place.

    `key` is a pattern; ``TOML`` stands for faults of the syntax, which have a line but no key.
    The file's own name must not count, so it is taken out first.
    """
    assert outcome.code == 2, outcome.err[:_LONGEST]
    assert outcome.out == ""
    message = outcome.err
    assert message.startswith("cagewright: ")
    assert message.count("cagewright: ") == 1
    assert message.endswith("\n")
    assert "Traceback" not in message
    assert "defect" not in message
    assert len(message) <= _LONGEST
    first, *more = message.rstrip("\n").split("\n")
    assert all(line.startswith("hint: ") for line in more), "more than one message"
    assert all(line.isprintable() for line in (first, *more)), "control characters came through"
    text = first.replace(file, "FILE") if file else first
    assert_names(text, key)
    if hint is not None:
        place = message.find("hint: ")
        assert place >= 0, f"no hint in: {message}"
        assert re.search(rf"(?<![\w-]){re.escape(hint)}(?![\w-])", message[place:])
