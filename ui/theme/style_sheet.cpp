#include "ui/theme/style_sheet.hpp"

namespace sinewright::ui {
namespace {

// Widgets that need more than the plain look carry a dynamic property `role`: card, quiet, primary, heading, note.
constexpr const char* sheet_text = R"(
QWidget { color: {ink}; }
QMainWindow, QDialog { background: {panel}; }
QToolTip { background: {raised}; color: {ink}; border: 1px solid {line}; border-radius: 4px; padding: 4px 6px; }

QPushButton, QToolButton { background: {raised}; color: {ink}; border: 1px solid {line}; border-radius: 6px;
    padding: 5px 11px; min-height: 18px; }
QPushButton:hover, QToolButton:hover { border-color: {soft}; }
QPushButton:pressed, QToolButton:pressed { background: {grid}; }
QPushButton:focus, QToolButton:focus { border: 1px solid {accent}; outline: none; }
QPushButton:checked, QToolButton:checked { border: 1px solid {accent}; background: {meets_ground}; }
QPushButton:disabled, QToolButton:disabled { color: {faint}; background: transparent; }
QPushButton[role="primary"] { background: {accent}; color: {sheet}; border-color: {accent}; font-weight: 600; }
QPushButton[role="primary"]:focus { border: 2px solid {ink}; padding: 4px 10px; }
QPushButton[role="quiet"], QToolButton[role="quiet"] { background: transparent; border: 1px solid transparent; }
QPushButton[role="quiet"]:hover, QToolButton[role="quiet"]:hover { background: {grid}; }
QPushButton[role="quiet"]:focus, QToolButton[role="quiet"]:focus { border: 1px solid {accent}; }
QPushButton[role="link"], QToolButton[role="link"] { background: transparent; border: 1px solid transparent;
    border-radius: 4px; padding: 2px 0; color: {accent}; }
QPushButton[role="link"]:hover, QToolButton[role="link"]:hover { text-decoration: underline; }
QPushButton[role="link"]:focus, QToolButton[role="link"]:focus { border-color: {accent}; }
QToolButton::menu-indicator, QPushButton::menu-indicator { image: none; width: 0; }

QLineEdit, QPlainTextEdit, QComboBox { background: {raised}; color: {ink}; border: 1px solid {line};
    border-radius: 6px; padding: 4px 8px; min-height: 18px; selection-background-color: {accent};
    selection-color: {sheet}; }
QLineEdit:hover, QPlainTextEdit:hover, QComboBox:hover { border-color: {soft}; }
QLineEdit:focus, QPlainTextEdit:focus, QComboBox:focus { border: 1px solid {accent}; }
QLineEdit[fault="true"] { border: 1px solid {misses}; }
QLineEdit[role="title"] { background: transparent; border: 1px solid transparent; font-weight: 600;
    padding: 4px 6px; }
QLineEdit[role="title"]:hover { border-color: {line}; }
QLineEdit[role="title"]:focus { background: {raised}; border: 1px solid {accent}; }
QLineEdit[role="pill"] { border-radius: 23px; padding: 4px 14px; }
QLineEdit[role="flat"], QLineEdit[role="flat-value"], QLineEdit[role="flat-small"] { background: transparent;
    border: 1px solid transparent; border-radius: 4px; padding: 1px 3px; min-height: 16px; }
QLineEdit[role="flat"] { color: {soft}; }
QLineEdit[role="flat-value"] { font-weight: 600; }
QLineEdit[role="flat-small"] { color: {faint}; font-size: {axis}; min-height: 12px; }
QLineEdit[role="flat"]:hover, QLineEdit[role="flat-value"]:hover, QLineEdit[role="flat-small"]:hover {
    border-color: {line}; }
QLineEdit[role="flat"]:focus, QLineEdit[role="flat-value"]:focus, QLineEdit[role="flat-small"]:focus {
    border-color: {accent}; }
QToolButton[role="flat-small"] { background: transparent; border: 1px solid transparent; color: {faint};
    font-size: {axis}; padding: 0 4px; min-height: 12px; }
QToolButton[role="flat-small"]:hover { border-color: {line}; }
QToolButton[role="flat-small"]:focus { border-color: {accent}; }
QToolButton[role="small"] { font-size: {axis}; padding: 1px 6px; min-height: 16px; border-radius: 4px; }
QToolButton[role="fold"] { background: transparent; border: 1px solid transparent; padding: 0 6px; color: {soft}; }
QToolButton[role="fold"]:focus { border-color: {accent}; }

QComboBox::drop-down { border: none; width: 22px; }
QComboBox QAbstractItemView { background: {raised}; border: 1px solid {line}; outline: none;
    selection-background-color: {meets_ground}; selection-color: {ink}; }

QTabWidget::pane { border: none; }
QTabBar { background: transparent; }
QTabBar::tab { background: transparent; color: {soft}; border: 1px solid transparent; border-radius: 8px;
    padding: 6px 24px; margin: 0 8px 0 0; }
QTabBar::tab:hover { color: {ink}; }
QTabBar::tab:selected { background: {raised}; color: {ink}; border: 1px solid {line}; font-weight: 600; }
QTabBar::tab:focus { border: 1px solid {accent}; }

QMenu { background: {raised}; border: 1px solid {line}; border-radius: 8px; padding: 6px; }
QMenu::item { padding: 6px 28px 6px 14px; border-radius: 4px; background: transparent; }
QMenu::item:selected { background: {meets_ground}; color: {ink}; }
QMenu::item:disabled { color: {faint}; }
QMenu::separator { height: 1px; background: {line}; margin: 6px 8px; }
QMenu::indicator { width: 14px; height: 14px; margin-left: 6px; }

QSlider { min-height: 22px; }
QSlider::groove:horizontal { height: 4px; border-radius: 2px; background: {line}; }
QSlider::sub-page:horizontal { height: 4px; border-radius: 2px; background: {accent}; }
QSlider::handle:horizontal { width: 14px; height: 14px; margin: -7px 0; border: 2px solid {accent};
    border-radius: 9px; background: {raised}; }
QSlider::handle:horizontal:hover, QSlider::handle:horizontal:focus { background: {meets_ground}; }
QSlider::handle:horizontal:pressed { background: {accent}; }

QScrollBar:vertical { width: 10px; background: transparent; margin: 0; }
QScrollBar:horizontal { height: 10px; background: transparent; margin: 0; }
QScrollBar::handle { background: {line}; border-radius: 4px; margin: 1px; min-height: 24px; min-width: 24px; }
QScrollBar::handle:hover { background: {soft}; }
QScrollBar::add-line, QScrollBar::sub-line { width: 0; height: 0; }
QScrollBar::add-page, QScrollBar::sub-page { background: transparent; }
QScrollArea { border: none; background: transparent; }
QSplitter::handle { background: {line}; }
QSplitter::handle:hover { background: {accent}; }

QListView, QListWidget { background: transparent; border: none; outline: none; }
QListWidget::item { padding: 4px 8px; border-radius: 4px; }
QListWidget::item:hover { background: {grid}; }
QListWidget::item:selected { background: {meets_ground}; color: {ink}; }

QLabel { background: transparent; }
QLabel[role="soft"], QLabel[role="note"] { color: {soft}; }
QLabel[role="card-title"] { font-weight: 600; font-size: {note}; }
QLabel[role="floating-note"] { background: {ink}; color: {sheet}; border-radius: 8px; padding: 7px 14px; }
QLabel[role="fault"] { color: {misses}; font-size: {note}; }
QFrame[role="card"] { background: {raised}; border: 1px solid {line}; border-radius: 10px; }
QFrame[role="bar-fault"] { background: {misses_ground}; border: none; border-bottom: 1px solid {line}; }
QFrame[role="bar-note"] { background: {meets_ground}; border: none; border-bottom: 1px solid {line}; }
)";

} // namespace

QString style_sheet(const Theme& t) {
    QString text = QString::fromLatin1(sheet_text);
    const std::pair<const char*, const QColor*> colours[] = {
        {"ink", &t.ink},
        {"panel", &t.panel},
        {"raised", &t.raised},
        {"line", &t.line},
        {"soft", &t.soft},
        {"grid", &t.grid},
        {"accent", &t.accent},
        {"sheet", &t.sheet},
        {"faint", &t.faint},
        {"misses", &t.misses},
        {"warn", &t.warn},
        {"meets_ground", &t.meets_ground},
        {"misses_ground", &t.misses_ground},
    };
    for (const auto& [name, colour] : colours) text.replace(QString("{%1}").arg(name), colour->name());
    // In points: a style sheet takes whole pixels only.
    const auto points = [&](double px) { return QString("%1pt").arg(t.font(px).pointSizeF()); };
    text.replace("{axis}", points(Theme::axis_px)).replace("{note}", points(Theme::note_px));
    return text;
}

} // namespace sinewright::ui
