"""The window in the sheet's colours: a palette and a little style, light and dark."""

from __future__ import annotations

from PySide6.QtCore import QPointF, Qt
from PySide6.QtGui import QColor, QIcon, QPainter, QPalette, QPen, QPixmap
from PySide6.QtWidgets import QApplication

from netsketch.sheet.look import DARK, LIGHT, Look

_ROLE = QPalette.ColorRole


def look_named(name: str) -> Look:
    """Return the look for "light", "dark" or "system"; a system that does not say which
    it prefers gets the light one."""
    if name == "system":
        dark = QApplication.styleHints().colorScheme() == Qt.ColorScheme.Dark
        return DARK if dark else LIGHT
    return DARK if name == "dark" else LIGHT


def apply_look(look: Look) -> None:
    """Give the whole application this look."""
    app = QApplication.instance()
    assert isinstance(app, QApplication)
    app.setStyle("Fusion")
    app.setPalette(_palette(look))
    app.setStyleSheet(_style(look))


def more_icon(look: Look) -> QIcon:
    """Return the mark for tools that have no room; the style's own is black on any ground."""
    picture = QPixmap(24, 32)
    picture.setDevicePixelRatio(2)
    picture.fill(Qt.GlobalColor.transparent)
    with QPainter(picture) as painter:
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        painter.setPen(QPen(QColor(look.ink), 1.5))
        for left in (2.0, 6.5):
            tip = QPointF(left + 3.5, 8)
            painter.drawPolyline([QPointF(left, 4.5), tip, QPointF(left, 11.5)])
    return QIcon(picture)


def _palette(look: Look) -> QPalette:
    palette = QPalette()
    for role, colour in (
        (_ROLE.Window, look.paper),
        (_ROLE.Base, look.plate),
        (_ROLE.AlternateBase, look.paper),
        (_ROLE.Button, look.plate),
        (_ROLE.ToolTipBase, look.ink),
        (_ROLE.ToolTipText, look.paper),
        (_ROLE.WindowText, look.ink),
        (_ROLE.Text, look.ink),
        (_ROLE.ButtonText, look.ink),
        (_ROLE.PlaceholderText, look.soft),
        (_ROLE.Highlight, look.ink),
        (_ROLE.HighlightedText, look.paper),
        (_ROLE.Link, look.path),
        (_ROLE.Mid, look.hairline),
        (_ROLE.Dark, look.hairline),
    ):
        palette.setColor(role, QColor(colour))
    for role in (_ROLE.WindowText, _ROLE.Text, _ROLE.ButtonText):
        palette.setColor(QPalette.ColorGroup.Disabled, role, QColor(look.faded))
    return palette


def _style(look: Look) -> str:
    return f"""
        QMainWindow::separator {{ background: {look.hairline}; width: 1px; height: 1px; }}
        QToolTip {{ color: {look.paper}; background: {look.ink}; border: none; padding: 3px; }}
        QMenuBar, QStatusBar, QToolBar {{ background: {look.paper}; color: {look.ink}; }}
        QToolBar#Trial {{ border: none; border-top: 1px solid {look.hairline}; }}
        QToolBar {{ border: none; border-bottom: 1px solid {look.hairline}; spacing: 4px; }}
        QToolButton {{ padding: 4px 8px; border: 1px solid transparent; border-radius: 4px; }}
        QToolButton#qt_toolbar_ext_button {{ padding: 0; }}
        QToolButton:hover {{ border-color: {look.hairline}; }}
        QToolButton:checked {{ background: {look.ink}; color: {look.paper}; }}
        QToolButton:focus {{ border-color: {look.ink}; }}
        QStatusBar {{ border-top: 1px solid {look.hairline}; }}
        QStatusBar::item {{ border: none; }}
        QHeaderView::section {{
            background: {look.paper}; color: {look.ink}; border: none;
            border-bottom: 1px solid {look.hairline}; padding: 4px 6px;
        }}
        QTableView {{
            border: 1px solid {look.hairline}; gridline-color: {look.hairline};
            background: {look.plate};
        }}
        QLabel[role="title"] {{ font-size: 17px; font-weight: bold; }}
        QLabel[role="soft"] {{ color: {look.soft}; }}
        QLabel[role="heading"] {{ font-weight: bold; padding-top: 8px; }}
        QLabel[role="name"] {{ font-weight: bold; }}
        QLineEdit {{
            border: 1px solid {look.faded}; border-radius: 3px; padding: 2px 4px;
            background: {look.plate};
        }}
        QLineEdit:focus {{ border: 2px solid {look.ink}; padding: 1px 3px; }}
        QLineEdit:disabled {{ border-color: {look.hairline}; }}
        QCheckBox {{ spacing: 6px; }}
        QCheckBox::indicator {{
            width: 13px; height: 13px; border: 1px solid {look.soft}; border-radius: 3px;
            background: {look.plate};
        }}
        QCheckBox::indicator:checked {{ background: {look.ink}; border-color: {look.ink}; }}
        QCheckBox:focus {{ text-decoration: underline; }}
        QFrame[role="chip"] {{
            border: 1px solid {look.ink}; border-radius: 11px; background: {look.plate};
        }}
        QScrollBar:horizontal {{ height: 10px; }}
        QFrame[role="notice"] {{ background: {look.ink}; }}
        QFrame[role="notice"] QLabel {{ color: {look.paper}; }}
    """
