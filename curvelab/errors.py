"""The exception tree: every error a person can cause says what is wrong, what is expected and what to do.

CurvelabError
    InputError (also ValueError)    what was given is wrong
        SheetError                  the file or page
        AxesError                   marks and axes
        TraceError                  guide places and curves
        FitError                    points that no band can follow
        WorksheetError              the worksheet's text
        DeviceError                 a device, its settings or what it is asked
        StandardError               a rule table
    LibraryError                    the library file
        SchemaError                 its schema version
        NotFoundError (LookupError) a key or revision that is not there
    Cancelled                       the person stopped long work
"""


class CurvelabError(Exception):
    """Parent of everything raised on purpose.

    Parameters
    ----------
    problem : str
        What is wrong, with the value and its place.
    expected : str
        What would be right; may be empty.
    fix : str
        What to do; may be empty.
    """

    def __init__(self, problem: str, expected: str = "", fix: str = "") -> None:
        super().__init__(problem, expected, fix)
        self.problem = problem
        self.expected = expected
        self.fix = fix

    def __str__(self) -> str:
        """One line: problem, expectation and remedy as sentences."""
        sentences = (" ".join(part.split()) for part in (self.problem, self.expected, self.fix))
        return " ".join(text if text.endswith((".", "?", "!")) else text + "." for text in sentences if text)


class InputError(CurvelabError, ValueError):
    """What was given is wrong."""


class SheetError(InputError):
    """The sheet's file or page cannot be used."""


class AxesError(InputError):
    """The axes cannot be calibrated from what was given."""


class TraceError(InputError):
    """No line can be followed where the guide says."""


class FitError(InputError):
    """The points cannot be followed by one monotone band."""


class WorksheetError(InputError):
    """The worksheet's text is not a valid worksheet."""


class DeviceError(InputError):
    """The device is described wrongly, or asked what it cannot answer."""


class StandardError(InputError):
    """A rule table is not valid."""


class LibraryError(CurvelabError):
    """The library file cannot be used."""


class SchemaError(LibraryError):
    """The library has a schema this program does not know."""


class NotFoundError(LibraryError, LookupError):
    """A key or revision is not in the library."""


class Cancelled(CurvelabError):  # noqa: N818 - it is an event, not an error
    """The person stopped long work."""

    def __init__(self) -> None:
        super().__init__("Stopped on request")
