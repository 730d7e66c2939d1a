"""pdfium's own functions with whole numbers for handles, which cost half of what its Python objects do.

A page has thousands of characters and hundreds of objects, and each takes several calls.
"""

from __future__ import annotations

import ctypes
from collections.abc import Iterator
from functools import cache
from typing import Any, NamedTuple

from extract.documents.words import Box

TEXT, PATH, IMAGE, FORM = 1, 2, 3, 5
BEND, MOVE = 1, 2
INVISIBLE = 3

_HANDLE, _NUMBER, _SIZE, _LENGTH = ctypes.c_void_p, ctypes.c_int, ctypes.c_ulong, ctypes.c_size_t
# Where a function writes what it finds.
_OUT = ctypes.c_void_p
_FUNCTIONS: dict[str, tuple[str, Any, tuple[Any, ...]]] = {
    "count_objects": ("FPDFPage_CountObjects", _NUMBER, (_HANDLE,)),
    "object_at": ("FPDFPage_GetObject", _HANDLE, (_HANDLE, _NUMBER)),
    "count_form_objects": ("FPDFFormObj_CountObjects", _NUMBER, (_HANDLE,)),
    "form_object_at": ("FPDFFormObj_GetObject", _HANDLE, (_HANDLE, _SIZE)),
    "kind": ("FPDFPageObj_GetType", _NUMBER, (_HANDLE,)),
    "matrix": ("FPDFPageObj_GetMatrix", _NUMBER, (_HANDLE, _OUT)),
    "bounds": ("FPDFPageObj_GetBounds", _NUMBER, (_HANDLE, _OUT, _OUT, _OUT, _OUT)),
    "count_marks": ("FPDFPageObj_CountMarks", _NUMBER, (_HANDLE,)),
    "mark": ("FPDFPageObj_GetMark", _HANDLE, (_HANDLE, _SIZE)),
    "mark_value_kind": ("FPDFPageObjMark_GetParamValueType", _NUMBER, (_HANDLE, ctypes.c_char_p)),
    "fill_colour": ("FPDFPageObj_GetFillColor", _NUMBER, (_HANDLE, _OUT, _OUT, _OUT, _OUT)),
    "pixels": ("FPDFImageObj_GetImagePixelSize", _NUMBER, (_HANDLE, _OUT, _OUT)),
    "font": ("FPDFTextObj_GetFont", _HANDLE, (_HANDLE,)),
    "font_size": ("FPDFTextObj_GetFontSize", _NUMBER, (_HANDLE, _OUT)),
    "text_mode": ("FPDFTextObj_GetTextRenderMode", _NUMBER, (_HANDLE,)),
    "font_name": ("FPDFFont_GetBaseFontName", _LENGTH, (_HANDLE, _OUT, _LENGTH)),
    "draw_mode": ("FPDFPath_GetDrawMode", _NUMBER, (_HANDLE, _OUT, _OUT)),
    "count_segments": ("FPDFPath_CountSegments", _NUMBER, (_HANDLE,)),
    "segment": ("FPDFPath_GetPathSegment", _HANDLE, (_HANDLE, _NUMBER)),
    "point": ("FPDFPathSegment_GetPoint", _NUMBER, (_HANDLE, _OUT, _OUT)),
    "segment_kind": ("FPDFPathSegment_GetType", _NUMBER, (_HANDLE,)),
    "closes": ("FPDFPathSegment_GetClose", _NUMBER, (_HANDLE,)),
    "count_chars": ("FPDFText_CountChars", _NUMBER, (_HANDLE,)),
    "code": ("FPDFText_GetUnicode", ctypes.c_uint, (_HANDLE, _NUMBER)),
    "text": ("FPDFText_GetText", _NUMBER, (_HANDLE, _NUMBER, _NUMBER, _OUT)),
    "text_object": ("FPDFText_GetTextObject", _HANDLE, (_HANDLE, _NUMBER)),
    "loose_box": ("FPDFText_GetLooseCharBox", _NUMBER, (_HANDLE, _NUMBER, _OUT)),
    "origin": ("FPDFText_GetCharOrigin", _NUMBER, (_HANDLE, _NUMBER, _OUT, _OUT)),
    "has_no_map": ("FPDFText_HasUnicodeMapError", _NUMBER, (_HANDLE, _NUMBER)),
}


class Calls:
    """The functions above by their short names; `complete` is False for a pdfium too old to have all of them."""

    def __init__(self) -> None:
        from pypdfium2 import raw

        self.complete = True
        for short, (name, result, takes) in _FUNCTIONS.items():
            found = getattr(raw, name, None)
            if found is None:
                self.complete = False
            else:
                address = ctypes.cast(found, ctypes.c_void_p).value or 0
                setattr(self, short, ctypes.CFUNCTYPE(result, *takes)(address))

    def __getattr__(self, name: str) -> Any:
        raise AttributeError(f"this pdfium has no {_FUNCTIONS[name][0] if name in _FUNCTIONS else name}")


@cache
def calls() -> Calls:
    """The functions, looked up once."""
    return Calls()


def handle_of(helper: Any) -> int:
    """Handle of a pypdfium2 page or text page."""
    return ctypes.cast(helper.raw, ctypes.c_void_p).value or 0


class Matrix(NamedTuple):
    """From (x, y) to (ax + cy + e, bx + dy + f)."""

    a: float
    b: float
    c: float
    d: float
    e: float
    f: float

    def then(self, outer: Matrix) -> Matrix:
        a, b, c, d, e, f = self
        oa, ob, oc, od, oe, of = outer
        moved = (e * oa + f * oc + oe, e * ob + f * od + of)
        return Matrix(a * oa + b * oc, a * ob + b * od, c * oa + d * oc, c * ob + d * od, *moved)

    def point(self, x: float, y: float) -> tuple[float, float]:
        return self.a * x + self.c * y + self.e, self.b * x + self.d * y + self.f


IDENTITY = Matrix(1.0, 0.0, 0.0, 1.0, 0.0, 0.0)


def matrix_of(item: int) -> Matrix:
    """The object's own matrix."""
    values = (ctypes.c_float * 6)()
    calls().matrix(item, ctypes.addressof(values))
    return Matrix(*values)


def bounds_of(item: int) -> Box:
    """The object's box in its holder's units: left, down, right, up."""
    values = (ctypes.c_float * 4)()
    place = ctypes.addressof(values)
    calls().bounds(item, place, place + 4, place + 8, place + 12)
    return (values[0], values[1], values[2], values[3])


def objects_of(holder: int, deepest: int, outer: Matrix | None = None) -> Iterator[tuple[int, int, Matrix]]:
    """Each object of a page in the order of drawing, its kind, and the matrix of the forms that it stands in.

    The objects of a form follow the form itself, down to so many forms inside one another.
    """
    call = calls()
    count, at = (
        (call.count_objects, call.object_at) if outer is None else (call.count_form_objects, call.form_object_at)
    )
    outer = outer or IDENTITY
    for index in range(count(holder)):
        item = at(holder, index)
        kind = call.kind(item)
        yield item, kind, outer
        if kind == FORM and deepest:
            yield from objects_of(item, deepest - 1, matrix_of(item).then(outer))
