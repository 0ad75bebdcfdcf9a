"""A record laid out on pages as PDF.

``python -m netsketch.sheet.print`` does it in a process of its own: it reads the record as
JSON and writes the PDF. Qt holds the interpreter's lock for as long as it lays a document
out or reads a picture, up to seconds, and no window moves meanwhile.
"""

from __future__ import annotations

import re
import sys

import msgspec
from PySide6.QtCore import (
    QBuffer,
    QByteArray,
    QIODevice,
    QMarginsF,
    QObject,
    QRect,
    QRectF,
    QSizeF,
    Qt,
)
from PySide6.QtGui import (
    QAbstractTextDocumentLayout,
    QColor,
    QFont,
    QGuiApplication,
    QPageSize,
    QPainter,
    QPdfWriter,
    QPyTextObject,
    QTextBlock,
    QTextCursor,
    QTextDocument,
    QTextFormat,
)
from PySide6.QtSvg import QSvgRenderer

from netsketch.reports.record import Record
from netsketch.reports.record_html import PAGE_PICTURE, print_html
from netsketch.sheet.look import LIGHT
from netsketch.sheet.picture import ensure_application

DOTS, LAID_OUT = 288, 96
"""Dots per inch of the pages, fine enough for hairlines, and of the layout: pixels of CSS."""

MARGIN_MM, FOOT_MM = 14.0, 8.0
PART_OF_PAGE = 0.44
"""The highest a picture gets, as a part of the page: two stand on one."""


_EMPTY_PATH = re.compile(r'<path [^>]*d=""/>')
"""What Qt writes where nothing is painted, and warns of when it reads it."""


class _Pictures(QPyTextObject):
    """Paints the pictures of a record where its text says, as lines and text, not dots."""

    def __init__(self, record: Record, page: QSizeF, parent: QObject) -> None:
        super().__init__(parent)
        self._page = page
        self._drawn = {
            PAGE_PICTURE.format(n): QSvgRenderer(
                QByteArray(_EMPTY_PATH.sub("", picture.svg).encode()), self
            )
            for n, picture in enumerate(record.pictures)
        }

    def intrinsicSize(self, doc: QTextDocument, at: int, form: QTextFormat) -> QSizeF:  # noqa: N802
        size = QSizeF(self._renderer(form).defaultSize())
        widest = QSizeF(self._page.width(), self._page.height() * PART_OF_PAGE)
        return size.scaled(widest, Qt.AspectRatioMode.KeepAspectRatio)

    def drawObject(  # noqa: N802
        self,
        painter: QPainter,
        rect: QRectF | QRect,
        doc: QTextDocument,
        at: int,
        form: QTextFormat,
    ) -> None:
        self._renderer(form).render(painter, QRectF(rect))

    def _renderer(self, form: QTextFormat) -> QSvgRenderer:
        return self._drawn[form.toImageFormat().name()]


def pdf(record: Record) -> bytes:
    """Return the record as PDF on A4, with its pictures as drawings and the number of
    every page at its foot."""
    ensure_application()
    data = QByteArray()
    buffer = QBuffer(data)
    buffer.open(QIODevice.OpenModeFlag.WriteOnly)
    writer = QPdfWriter(buffer)
    writer.setTitle(f"Change record: {record.title}")
    writer.setCreator(f"netsketch {record.origin.version}")
    writer.setResolution(DOTS)
    writer.setPageSize(QPageSize(QPageSize.PageSizeId.A4))
    writer.setPageMargins(QMarginsF(MARGIN_MM, MARGIN_MM, MARGIN_MM, MARGIN_MM))
    foot = FOOT_MM / 25.4 * LAID_OUT
    area = QSizeF(writer.width(), writer.height()) * (LAID_OUT / DOTS) - QSizeF(0, foot)
    _paint(_laid_out(record, area), area, foot, writer, record.title)
    buffer.close()
    return bytes(data.data())


def _laid_out(record: Record, area: QSizeF) -> QTextDocument:
    text = QTextDocument()
    text.setUndoRedoEnabled(False)
    text.setDefaultFont(_font(12))
    text.documentLayout().registerHandler(
        QTextFormat.ObjectTypes.ImageObject.value, _Pictures(record, area, text)
    )
    text.setDocumentMargin(0)
    text.setPageSize(area)
    text.setHtml(print_html(record))
    _keep_headings(text, area.height())
    return text


def _keep_headings(text: QTextDocument, height: float) -> None:
    """Move every heading to the page of what it heads."""

    def page(block: QTextBlock) -> int:
        return int(text.documentLayout().blockBoundingRect(block).top() // height)

    block = text.begin()
    while block.isValid():
        after = block.next()
        if block.blockFormat().headingLevel() and after.isValid() and page(after) > page(block):
            form = block.blockFormat()
            form.setPageBreakPolicy(QTextFormat.PageBreakFlag.PageBreak_AlwaysBefore)
            QTextCursor(block).setBlockFormat(form)
            _lay_out_anew(text)
        block = after


def _lay_out_anew(text: QTextDocument) -> None:
    """Lay all of the text out: a change alone leaves tables and pictures behind it where
    they were."""
    text.markContentsDirty(0, text.characterCount())


def _paint(text: QTextDocument, area: QSizeF, foot: float, writer: QPdfWriter, title: str) -> None:
    pages = text.pageCount()
    with QPainter(writer) as painter:
        painter.scale(DOTS / LAID_OUT, DOTS / LAID_OUT)
        for page in range(pages):
            if page:
                writer.newPage()
            painter.save()
            painter.translate(0, -page * area.height())
            context = QAbstractTextDocumentLayout.PaintContext()
            context.clip = QRectF(0, page * area.height(), area.width(), area.height())
            painter.setClipRect(context.clip)
            text.documentLayout().draw(painter, context)
            painter.restore()
            place = QRectF(0, area.height(), area.width(), foot)
            _paint_foot(painter, place, f"Change record: {title}", f"{page + 1} of {pages}")


def _paint_foot(painter: QPainter, place: QRectF, title: str, number: str) -> None:
    painter.setPen(QColor(LIGHT.soft))
    painter.setFont(_font(10))
    below = Qt.AlignmentFlag.AlignBottom
    painter.drawText(place, below | Qt.AlignmentFlag.AlignLeft, title)
    painter.drawText(place, below | Qt.AlignmentFlag.AlignRight, number)


def _font(pixels: int) -> QFont:
    font = QFont(QGuiApplication.font())
    font.setPixelSize(pixels)
    font.setHintingPreference(QFont.HintingPreference.PreferNoHinting)
    return font


if __name__ == "__main__":
    sys.stdout.buffer.write(pdf(msgspec.json.decode(sys.stdin.buffer.read(), type=Record)))
