"""A record laid out on pages as PDF."""

from __future__ import annotations

from PySide6.QtCore import QBuffer, QByteArray, QIODevice, QMarginsF, QObject, QRect, QRectF, QSizeF, Qt
from PySide6.QtGui import (
    QAbstractTextDocumentLayout,
    QColor,
    QFont,
    QGuiApplication,
    QPageSize,
    QPainter,
    QPdfWriter,
    QPyTextObject,
    QTextDocument,
    QTextFormat,
)
from PySide6.QtSvg import QSvgRenderer

from netsketch.reports.record import Record
from netsketch.reports.record_html import PAGE_PICTURE, print_html
from netsketch.sheet.look import LIGHT
from netsketch.sheet.picture import ensure_application

DOTS = 288
"""Dots per inch in which pages are laid out: fine enough for hairlines."""

MARGIN_MM, FOOT_MM = 14.0, 8.0
PART_OF_PAGE = 0.44
"""The highest a picture gets, as a part of the page: two stand on one."""


class _Pictures(QPyTextObject):
    """Paints the pictures of a record where its text says, as lines and text, not dots."""

    def __init__(self, record: Record, page: QSizeF, parent: QObject) -> None:
        super().__init__(parent)
        self._page = page
        self._drawn = {
            PAGE_PICTURE.format(n): QSvgRenderer(QByteArray(picture.svg.encode()), self)
            for n, picture in enumerate(record.pictures)
        }

    def intrinsicSize(self, doc: QTextDocument, at: int, form: QTextFormat) -> QSizeF:  # noqa: N802
        size = QSizeF(self._renderer(form).defaultSize())
        widest = QSizeF(self._page.width(), self._page.height() * PART_OF_PAGE)
        return size.scaled(widest, Qt.AspectRatioMode.KeepAspectRatio)

    def drawObject(  # noqa: N802
        self, painter: QPainter, rect: QRectF | QRect, doc: QTextDocument, at: int, form: QTextFormat
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
    foot = FOOT_MM / 25.4 * DOTS
    area = QSizeF(writer.width(), writer.height() - foot)
    _paint(_laid_out(record, area, writer), area, foot, writer, record.title)
    buffer.close()
    return bytes(data.data())


def _laid_out(record: Record, area: QSizeF, writer: QPdfWriter) -> QTextDocument:
    text = QTextDocument()
    text.setUndoRedoEnabled(False)
    text.setDefaultFont(QFont(QGuiApplication.font().family(), 9))
    text.documentLayout().setPaintDevice(writer)
    text.documentLayout().registerHandler(
        QTextFormat.ObjectTypes.ImageObject.value, _Pictures(record, area, text)
    )
    text.setDocumentMargin(0)
    text.setPageSize(area)
    text.setHtml(print_html(record))
    return text


def _paint(text: QTextDocument, area: QSizeF, foot: float, writer: QPdfWriter, title: str) -> None:
    pages = text.pageCount()
    with QPainter(writer) as painter:
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
    painter.setFont(QFont(QGuiApplication.font().family(), 7))
    below = Qt.AlignmentFlag.AlignBottom
    painter.drawText(place, below | Qt.AlignmentFlag.AlignLeft, title)
    painter.drawText(place, below | Qt.AlignmentFlag.AlignRight, number)
