"""Many outputs in one call: a verdict or an error for each, none of which stops the others."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from tensorsym.errors import TensorsymError
from tensorsym.tasks.check_file import CheckReport, check_file

if TYPE_CHECKING:
    from collections.abc import Iterable, Iterator


@dataclass(frozen=True, eq=False)
class CheckedFile:
    """What became of one file."""

    source: str
    """The file."""
    report: CheckReport | None
    """Its verdicts; None when it could not be checked."""
    error: TensorsymError | None
    """Why it could not be checked."""

    def exit_code(self, on: str = "inconsistent") -> int:
        """Return the exit code that the file alone would give, failing on ``inconsistent``, ``unstable`` or ``any``."""
        if self.error is not None:
            return self.error.exit_code
        return int(self.report is None or self.report.fails(on))


def check_each(paths: Iterable[str], **options: Any) -> Iterator[CheckedFile]:
    """Yield the verdicts on each file; options are those of `tensorsym.tasks.check_file.check_file`."""
    for path in paths:
        try:
            yield CheckedFile(path, check_file(path, **options), None)
        except TensorsymError as error:
            yield CheckedFile(path, None, error)
