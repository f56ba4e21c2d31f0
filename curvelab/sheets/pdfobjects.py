"""The objects painted on a PDF page, forms within forms opened, each with its map to places and what clips it."""

import ctypes
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any

import pypdfium2 as pdfium
from pypdfium2 import raw

from curvelab.records.arrays import Floats
from curvelab.sheets import limits
from curvelab.sheets.affine import apply, compose, from_six
from curvelab.sheets.clip import Clip, clip_of
from curvelab.sheets.pdfpaths import clip_segments, subpaths
from curvelab.sheets.source import Source
from curvelab.sheets.strokes import FLATNESS


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Painted:
    """One path or image object.

    Parameters
    ----------
    handle : PDFium's object
    kind : int
        PDFium's number of the object's type.
    to_place : array, shape (2, 3)
        Map from the object's own space to places.
    clips : tuple of Clip
        Areas, in places, outside of which nothing of it shows.
    """

    handle: Any
    kind: int
    to_place: Floats
    clips: tuple[Clip, ...]


class Walk:
    """One walk over all objects of a page in painting order.

    Parameters
    ----------
    source : Source
        For the messages.
    """

    def __init__(self, source: Source) -> None:
        self._source = source
        self._seen = 0
        self._clips: dict[tuple[bytes, ...], Clip] = {}

    def objects(self, page: pdfium.PdfPage, to_place: Floats) -> Iterator[Painted]:
        """Paths and images of the page.

        Raises
        ------
        SheetError
            The page has more objects, or deeper nested forms, than the limits allow.
        """
        count = raw.FPDFPage_CountObjects(page)
        handles = (raw.FPDFPage_GetObject(page, index) for index in range(count))
        yield from self._walk(handles, to_place, (), 0)

    def _walk(self, handles: Iterator[Any], to_place: Floats, clips: tuple[Clip, ...], depth: int) -> Iterator[Painted]:
        if depth > limits.NESTING:
            raise self._source.over("levels of nested forms", limits.NESTING)
        for handle in handles:
            self._seen += 1
            if self._seen > limits.ELEMENTS:
                raise self._source.over("objects", limits.ELEMENTS)
            kind = raw.FPDFPageObj_GetType(handle)
            if kind not in (raw.FPDF_PAGEOBJ_PATH, raw.FPDF_PAGEOBJ_IMAGE, raw.FPDF_PAGEOBJ_FORM):
                continue
            inner = compose(to_place, _matrix(handle))
            inside = clips + self._clips_of(handle, to_place)
            if kind == raw.FPDF_PAGEOBJ_FORM:
                count = raw.FPDFFormObj_CountObjects(handle)
                children = (raw.FPDFFormObj_GetObject(handle, index) for index in range(count))
                yield from self._walk(children, inner, inside, depth + 1)
            else:
                yield Painted(handle=handle, kind=kind, to_place=inner, clips=inside)

    def _clips_of(self, handle: Any, to_place: Floats) -> tuple[Clip, ...]:
        path = raw.FPDFPageObj_GetClipPath(handle)
        count = raw.FPDFClipPath_CountPaths(path) if path else 0
        clips = []
        for index in range(max(count, 0)):
            polygons = [apply(to_place, points) for points, _ in subpaths(clip_segments(path, index), FLATNESS)]
            if polygons:
                clips.append(self._shared(polygons))
        return tuple(clips)

    def _shared(self, polygons: list[Floats]) -> Clip:
        """One record for the many objects behind the same clip."""
        key = tuple(polygon.tobytes() for polygon in polygons)
        if key not in self._clips:
            self._clips[key] = clip_of(polygons)
        return self._clips[key]


def _matrix(handle: Any) -> Floats:
    matrix = raw.FS_MATRIX()
    raw.FPDFPageObj_GetMatrix(handle, ctypes.byref(matrix))
    return from_six((matrix.a, matrix.b, matrix.c, matrix.d, matrix.e, matrix.f))
