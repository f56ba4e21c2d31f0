"""Which page of which bytes is being read, and the errors that every kind of file shares."""

from dataclasses import dataclass

from curvelab.errors import SheetError
from curvelab.sheets import limits


@dataclass(frozen=True, kw_only=True, slots=True)
class Source:
    """Bytes of a file, the page asked for and how to name it in messages."""

    name: str
    data: bytes
    sha256: str
    page: int

    def require_page(self, pages: int) -> None:
        """Refuse a page that the file does not have.

        Raises
        ------
        SheetError
            The page is not one of 1 to ``pages``.
        """
        if not 1 <= self.page <= pages:
            has = "one page" if pages == 1 else f"{pages} pages"
            raise SheetError(f"'{self.name}' has no page {self.page}", f"It has {has}", "Choose a page from 1 on")

    def require_pixels(self, width: int, height: int) -> None:
        """Refuse an image over the limit before it is decoded.

        Raises
        ------
        SheetError
            It has too many pixels, or none.
        """
        if width < 1 or height < 1:
            raise SheetError(f"The image in '{self.name}' has no pixels ({width} x {height})")
        if width * height > limits.PIXELS:
            raise SheetError(
                f"The image in '{self.name}' has {width} x {height} pixels",
                f"At most {limits.PIXELS / 1e6:.0f} million are read",
                "Save it at a lower resolution, or the plot alone",
            )

    def damaged(self, what: str) -> SheetError:
        """The error for content that its decoder refuses."""
        return SheetError(
            f"Page {self.page} of '{self.name}' cannot be read as {what}",
            "The file is damaged, or uses a feature that is not known",
            "Open it in a viewer and save it again",
        )

    def over(self, what: str, limit: int) -> SheetError:
        """The error for a page that carries too much of something."""
        return SheetError(
            f"Page {self.page} of '{self.name}' has too many {what}",
            f"At most {limit} are read",
            "Save the plot alone, or scan the page",
        )
