"""Every question to the person, behind one object that a test can replace."""

from __future__ import annotations

from pathlib import Path

from PySide6.QtCore import Qt
from PySide6.QtWidgets import (
    QDialog,
    QDialogButtonBox,
    QFileDialog,
    QInputDialog,
    QMessageBox,
    QTextBrowser,
    QVBoxLayout,
    QWidget,
)

from netsketch.window.literal import as_tip

SAVE, THROW_AWAY, GO_BACK = "save", "throw away", "go back"

_PLAIN = Qt.TextFormat.PlainText
_PAGE_WIDTH, _PAGE_HEIGHT = 640, 720
_PLANS = "Plans and graphs (*.json *.graphml *.xml *.gml);;All files (*)"
_SAVES = "netsketch plan (*.netsketch.json);;GraphML (*.graphml);;GML (*.gml)"
_RECORDS = "HTML (*.html);;PDF (*.pdf);;Markdown (*.md)"
_PICTURES = "SVG (*.svg);;PNG (*.png);;PDF (*.pdf)"


class Questions:
    """Dialogs over a window. ``None`` and :data:`GO_BACK` mean the person changed their
    mind."""

    def __init__(self, window: QWidget) -> None:
        self._window = window

    def unsaved(self, title: str) -> str:
        """Ask what to do with edits that are not saved."""
        box = QMessageBox(self._window)
        box.setWindowTitle("Unsaved edits")
        box.setTextFormat(_PLAIN)
        box.setText(f"“{title}” has edits that are not saved.")
        box.setInformativeText("Save them before going on?")
        save = box.addButton("Save", QMessageBox.ButtonRole.AcceptRole)
        away = box.addButton("Throw away", QMessageBox.ButtonRole.DestructiveRole)
        box.addButton("Go back", QMessageBox.ButtonRole.RejectRole)
        box.setDefaultButton(save)
        box.exec()
        clicked = box.clickedButton()
        return SAVE if clicked is save else THROW_AWAY if clicked is away else GO_BACK

    def file_to_open(self, folder: Path) -> Path | None:
        """Ask for a file to open."""
        name, _ = QFileDialog.getOpenFileName(self._window, "Open", str(folder), _PLANS)
        return Path(name) if name else None

    def file_to_save(self, suggested: Path) -> Path | None:
        """Ask where to save the plan."""
        return self._save("Save as", suggested, _SAVES, ".netsketch.json")

    def file_for_picture(self, suggested: Path) -> Path | None:
        """Ask where to save a picture of the sheet."""
        return self._save("Save a picture", suggested, _PICTURES, ".svg")

    def file_for_record(self, suggested: Path) -> Path | None:
        """Ask where to write a change record."""
        return self._save("Write the record", suggested, _RECORDS, ".html")

    def file_for_table(self, suggested: Path) -> Path | None:
        """Ask where to save a table as CSV."""
        return self._save("Save as CSV", suggested, "CSV (*.csv)", ".csv")

    def _save(self, title: str, suggested: Path, kinds: str, suffix: str) -> Path | None:
        name, chosen = QFileDialog.getSaveFileName(self._window, title, str(suggested), kinds)
        if not name:
            return None
        path = Path(name)
        if not path.suffix:
            kind = chosen.partition("(*")[2].rstrip(")") or suffix
            path = path.with_name(path.name + kind)
        return path

    def text(self, title: str, label: str, value: str) -> str | None:
        """Ask for a line of text."""
        text, sure = QInputDialog.getText(self._window, title, as_tip(label), text=value)
        return text if sure else None

    def tell(self, title: str, text: str) -> None:
        """Say something short that must not be missed; ``text`` may be HTML of our own."""
        QMessageBox.information(self._window, title, text)

    def read(self, title: str, text: str) -> None:
        """Show a long text, HTML of our own, that scrolls where the screen is too small."""
        page = QDialog(self._window)
        page.setAttribute(Qt.WidgetAttribute.WA_DeleteOnClose)
        page.setWindowTitle(title)
        lines = QTextBrowser()
        lines.setAccessibleName(title)
        lines.setHtml(text)
        close = QDialogButtonBox(QDialogButtonBox.StandardButton.Close)
        close.rejected.connect(page.reject)
        column = QVBoxLayout(page)
        column.addWidget(lines)
        column.addWidget(close)
        room = self._window.screen().availableSize()
        page.resize(
            min(_PAGE_WIDTH, room.width() * 9 // 10), min(_PAGE_HEIGHT, room.height() * 4 // 5)
        )
        page.exec()

    def refuse(self, text: str) -> None:
        """Say why something was not done."""
        box = QMessageBox(self._window)
        box.setIcon(QMessageBox.Icon.Warning)
        box.setWindowTitle("Not done")
        box.setTextFormat(_PLAIN)
        box.setText(text)
        box.exec()
