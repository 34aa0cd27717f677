#include "ui/values/quantity_field.hpp"
#include "core/quantity/quantity.hpp"
#include "ui/document/document.hpp"
#include <QKeyEvent>
#include <QStyle>
#include <QWheelEvent>
#include <cmath>

namespace sinewright::ui {
namespace {
constexpr double fine_step = 1.01;  // Shift: 1 %
constexpr double wheel_notch = 120; // Qt's unit of a wheel's notch
constexpr int fine_digits = 4;      // digits kept by a fine step, so that the code stays readable

double rounded_to_digits(double value, int digits) { return QString::number(value, 'g', digits).toDouble(); }
} // namespace

QuantityField::QuantityField(const QString& unit, QWidget* parent) : QLineEdit(parent), unit_(unit) {
    connect(this, &QLineEdit::editingFinished, this, &QuantityField::read_text);
    connect(this, &QLineEdit::textEdited, this, [this] { show_fault({}); });
}

QString QuantityField::text_of(const Value& value, const QString& unit) {
    if (!value.spelling.empty()) return QString::fromStdString(value.spelling);
    return QString::fromStdString(letter_code(value.si, unit.toStdString()));
}

void QuantityField::show_value(const std::optional<Value>& value) {
    value_ = value;
    shown_text_ = value ? text_of(*value, unit_) : QString();
    if (hasFocus() && isModified()) return; // never under the user's fingers
    if (text() != shown_text_) setText(shown_text_);
    show_fault({});
}

void QuantityField::show_fault(const QString& sentence) {
    const bool faulty = !sentence.isEmpty();
    if (property("fault").toBool() != faulty) {
        setProperty("fault", faulty);
        style()->unpolish(this);
        style()->polish(this);
    }
    setAccessibleDescription(sentence);
    emit fault_changed(sentence);
}

void QuantityField::read_text() {
    const QString typed = text().trimmed();
    if (typed == shown_text_) {
        show_fault({});
        return;
    }
    if (typed.isEmpty()) {
        setModified(false);
        emit emptied();
        return;
    }
    const auto read = parse_quantity(typed.toStdString(), unit_.toStdString());
    if (!read) {
        show_fault(sentences(read.faults()));
        return;
    }
    setModified(false);
    emit accepted({*read, typed.toStdString()});
}

void QuantityField::step(int steps, bool fine) {
    if (!value_ || value_->si == 0 || steps == 0) return;
    const double size = std::abs(value_->si), sign = value_->si < 0 ? -1 : 1;
    const double next =
        fine ? rounded_to_digits(size * std::pow(fine_step, steps), fine_digits) : step_preferred(size, series_, steps);
    setModified(false);
    emit stepped({sign * next, letter_code(sign * next, unit_.toStdString())});
}

void QuantityField::keyPressEvent(QKeyEvent* event) {
    const bool fine = event->modifiers() & Qt::ShiftModifier;
    if (event->key() == Qt::Key_Up)
        step(1, fine);
    else if (event->key() == Qt::Key_Down)
        step(-1, fine);
    else if (event->key() == Qt::Key_Escape && text() != shown_text_) {
        setText(shown_text_);
        setModified(false);
        show_fault({});
    } else
        QLineEdit::keyPressEvent(event);
}

void QuantityField::wheelEvent(QWheelEvent* event) {
    if (!hasFocus()) { // a wheel that passes over scrolls the panel, it must not change a value
        event->ignore();
        return;
    }
    wheel_rest_ += event->angleDelta().y() ? event->angleDelta().y() : event->angleDelta().x();
    const int notches = int(wheel_rest_ / wheel_notch);
    wheel_rest_ -= notches * wheel_notch;
    step(notches, event->modifiers() & Qt::ShiftModifier);
    event->accept();
}

void QuantityField::focusOutEvent(QFocusEvent* event) {
    QLineEdit::focusOutEvent(event);
    emit steps_ended();
}

} // namespace sinewright::ui
