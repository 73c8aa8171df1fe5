"""The one tree of errors: every failure says what was given, where, what was expected and what to do next."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from collections.abc import Iterable


class TensorsymError(Exception):
    """Root of all errors of this package.

    Parameters
    ----------
    message : str
        What was given and why it cannot be used, one sentence without a full stop.
    where : str, optional
        File, line, row or argument in which it was found.
    expected : str, optional
        What would have been accepted.
    nearest : sequence of str, optional
        The valid names closest to the one given.
    hint : str, optional
        The next step for the user.
    """

    exit_code = 2
    """Exit code of the command line: 2 wrong usage, 3 input that cannot be read."""

    def __init__(
        self,
        message: str,
        *,
        where: str | None = None,
        expected: str | None = None,
        nearest: Iterable[str] = (),
        hint: str | None = None,
    ) -> None:
        self.message = message
        self.where = where
        self.expected = expected
        self.nearest = tuple(nearest)
        self.hint = hint
        super().__init__(self._one_line())

    def _one_line(self) -> str:
        line = f"{self.where}: {self.message}" if self.where else self.message
        if self.expected:
            line += f"; expected {self.expected}"
        if self.nearest:
            line += f"; nearest: {', '.join(self.nearest)}"
        if self.hint:
            line += f"; {self.hint}"
        return line

    def __reduce__(self) -> tuple[Any, ...]:
        """Pickle by the fields, since the message passed to `Exception` is the composed line."""
        return _rebuilt, (type(self), self.message, self.where, self.expected, self.nearest, self.hint)


class UsageError(TensorsymError, ValueError):
    """The question itself is wrong: an option, a combination, a name."""


class UnknownNameError(UsageError, LookupError):
    """A name that is not known; `nearest` offers those that are."""


class GroupSymbolError(UsageError):
    """A group symbol that names no point group."""


class LawError(UsageError):
    """A law or index equation that cannot be parsed; the message points at the character."""


class AxesError(UsageError):
    """Axes that cannot be built: unknown convention, parallel or zero directions."""


class InputError(TensorsymError, ValueError):
    """A file or array that cannot be used."""

    exit_code = 3


class StructureError(InputError):
    """A crystal structure that cannot be read or has no meaning."""


class OutputFileError(InputError):
    """An output of a calculation that cannot be read."""


class TensorFileError(InputError):
    """A tensor file that cannot be read."""


class ShapeError(InputError):
    """Numbers of the wrong shape, or numbers that are not finite."""


def nearest_names(name: str, known: Iterable[str], count: int = 4) -> tuple[str, ...]:
    """Return the known names closest to `name`, best first, at most `count` of them.

    >>> nearest_names("piezolectric", ["piezoelectric", "pyroelectric", "elastic-stiffness"], 1)
    ('piezoelectric',)
    """
    import difflib

    candidates = list(known)
    folded = {candidate.casefold(): candidate for candidate in candidates}
    close = difflib.get_close_matches(name.casefold(), folded, n=count, cutoff=0.5)
    containing = [key for key in folded if name and name.casefold() in key and key not in close]
    return tuple(folded[key] for key in (close + containing)[:count])


def _rebuilt(
    kind: type[TensorsymError],
    message: str,
    where: str | None,
    expected: str | None,
    nearest: tuple[str, ...],
    hint: str | None,
) -> TensorsymError:
    return kind(message, where=where, expected=expected, nearest=nearest, hint=hint)
