#include "ui/sheet/access.hpp"
#include "ui/sheet/reading.hpp"
#include "ui/sheet/sheet.hpp"
#include <QAccessibleWidget>
#include <map>

namespace sinewright::ui {

namespace {

class PartAccess : public QAccessibleInterface {
  public:
    PartAccess(SheetView& sheet, int index) : sheet_(sheet), index_(index) {}
    bool isValid() const override { return index_ < static_cast<int>(sheet_.drawing().parts().size()); }
    QObject* object() const override { return nullptr; }
    QAccessibleInterface* parent() const override { return QAccessible::queryAccessibleInterface(&sheet_); }
    QAccessibleInterface* child(int) const override { return nullptr; }
    int childCount() const override { return 0; }
    int indexOfChild(const QAccessibleInterface*) const override { return -1; }
    QAccessibleInterface* childAt(int, int) const override { return nullptr; }
    QAccessible::Role role() const override { return QAccessible::Graphic; }
    QString text(QAccessible::Text kind) const override {
        if (!isValid() || (kind != QAccessible::Name && kind != QAccessible::Description)) return {};
        return sheet_.part_in_words(index_);
    }
    void setText(QAccessible::Text, const QString&) override {}
    QRect rect() const override {
        if (!isValid()) return {};
        const QRectF reach = sheet_.drawing().parts()[static_cast<std::size_t>(index_)].reach();
        const QRect on_view = QRectF(sheet_.to_view(reach.topLeft()), sheet_.to_view(reach.bottomRight())).toRect();
        return {sheet_.mapToGlobal(on_view.topLeft()), on_view.size()};
    }
    QAccessible::State state() const override {
        QAccessible::State state;
        state.selectable = state.focusable = true;
        state.selected = state.focused = isValid() && sheet_.is_selected(index_);
        return state;
    }

  private:
    SheetView& sheet_;
    int index_;
};

class SheetAccess : public QAccessibleWidget {
  public:
    explicit SheetAccess(SheetView& sheet) : QAccessibleWidget(&sheet, QAccessible::Canvas), sheet_(sheet) {}
    ~SheetAccess() override {
        for (const auto& [index, id] : ids_) QAccessible::deleteAccessibleInterface(id);
    }
    int childCount() const override {
        return static_cast<int>(sheet_.drawing().parts().size()) + QAccessibleWidget::childCount();
    }
    QAccessibleInterface* child(int index) const override {
        const int parts = static_cast<int>(sheet_.drawing().parts().size());
        if (index < 0) return nullptr;
        if (index >= parts) return QAccessibleWidget::child(index - parts);
        const auto known = ids_.find(index);
        if (known != ids_.end()) return QAccessible::accessibleInterface(known->second);
        auto* part = new PartAccess(sheet_, index);
        ids_[index] = QAccessible::registerAccessibleInterface(part);
        return part;
    }
    int indexOfChild(const QAccessibleInterface* wanted) const override {
        for (const auto& [index, id] : ids_)
            if (QAccessible::accessibleInterface(id) == wanted) return index;
        const int inner = QAccessibleWidget::indexOfChild(wanted);
        return inner < 0 ? inner : inner + static_cast<int>(sheet_.drawing().parts().size());
    }
    QAccessibleInterface* focusChild() const override {
        for (int i = 0; i < static_cast<int>(sheet_.drawing().parts().size()); ++i)
            if (sheet_.hasFocus() && sheet_.is_selected(i)) return child(i);
        return QAccessibleWidget::focusChild();
    }

  private:
    SheetView& sheet_;
    mutable std::map<int, QAccessible::Id> ids_;
};

QAccessibleInterface* make_access(const QString&, QObject* object) {
    auto* sheet = qobject_cast<SheetView*>(object);
    return sheet ? new SheetAccess(*sheet) : nullptr;
}

} // namespace

void install_sheet_access() {
    static const bool installed = (QAccessible::installFactory(make_access), true);
    (void)installed;
}

void report_selection(SheetView& sheet, int part) {
    if (!QAccessible::isActive()) return;
    if (part >= 0) {
        QAccessibleEvent event(&sheet, QAccessible::Focus);
        event.setChild(part);
        QAccessible::updateAccessibility(&event);
    }
    QAccessibleEvent described(&sheet, QAccessible::DescriptionChanged);
    QAccessible::updateAccessibility(&described);
}

} // namespace sinewright::ui
