#include "ui/values/properties.hpp"
#include "ui/document/document.hpp"
#include "ui/sheet/editing.hpp"
#include "ui/values/design_form.hpp"
#include "ui/values/part_form.hpp"
#include <QEvent>
#include <QLabel>
#include <QPushButton>
#include <QScrollArea>
#include <QScrollBar>
#include <QTimer>
#include <QVBoxLayout>

namespace sinewright::ui {
namespace {

constexpr int card_width = 296;

/// A scroll area as tall as its content, as long as the card finds room for it.
class FormArea : public QScrollArea {
  public:
    explicit FormArea(QWidget* form) {
        setWidget(form);
        setWidgetResizable(true);
        setFrameShape(QFrame::NoFrame);
        setHorizontalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
        setFixedWidth(card_width);
        form->setAutoFillBackground(false);
        viewport()->setAutoFillBackground(false);
        setMinimumHeight(60);
        setFocusPolicy(Qt::NoFocus);
        form->installEventFilter(this);
    }
    QSize sizeHint() const override {
        const QWidget* form = widget();
        const int wanted = form->hasHeightForWidth() ? form->heightForWidth(card_width) : form->sizeHint().height();
        return {card_width, wanted};
    }
    bool eventFilter(QObject* watched, QEvent* event) override {
        if (watched == widget() && event->type() == QEvent::LayoutRequest) updateGeometry();
        return QScrollArea::eventFilter(watched, event);
    }
};

} // namespace

Properties::Properties(Document& document, QWidget* parent)
    : FloatingCard("properties", Qt::TopRightCorner, parent), document_(document) {
    connect(&document_, &Document::changed, this, &Properties::take_over);
    connect(&document_, &Document::selection_changed, this, &Properties::take_over);
    connect(this, &FloatingCard::folded_by_hand, this,
            [this](bool folded) { (built_for_.isEmpty() ? design_folded_ : part_folded_) = folded; });
    build();
}

QString Properties::subject() const {
    const QStringList& selected = document_.selection();
    if (selected.size() != 1) return selected.join(' ');
    const Part* part = document_.design().find(selected.front().toStdString());
    return selected.front() + (part ? ":" + QString::fromStdString(part->kind) : "");
}

void Properties::take_over() {
    if (subject() == built_for_) {
        if (part_form_) part_form_->show_part();
        if (design_form_) design_form_->take_over();
        return;
    }
    if (build_waits_) return;
    build_waits_ = true; // not at once: the change may come from a form that would vanish under its own call
    QTimer::singleShot(0, this, &Properties::build);
}

void Properties::put(QWidget* form, const QString& title) {
    set_title(title);
    set_folded(built_for_.isEmpty() ? design_folded_ : part_folded_);
    set_content(new FormArea(form));
    emit built();
}

void Properties::build() {
    build_waits_ = false;
    built_for_ = subject();
    part_form_ = nullptr;
    design_form_ = nullptr;
    const QStringList& selected = document_.selection();
    if (selected.isEmpty()) {
        design_form_ = new DesignForm(document_);
        put(design_form_, tr("Design"));
    } else if (selected.size() == 1) {
        const Part* part = document_.design().find(selected.front().toStdString());
        const PartKind* kind = part ? find_part_kind(part->kind) : nullptr;
        part_form_ = new PartForm(document_, selected.front());
        connect(part_form_, &PartForm::renamed, this, [this](const QString& to) { document_.select({to}); });
        put(part_form_, selected.front() +
                            (kind ? ", " + QString::fromUtf8(kind->title.data(), qsizetype(kind->title.size())) : ""));
    } else {
        show_several();
    }
}

void Properties::show_several() {
    const QStringList selected = document_.selection();
    auto* form = new QWidget;
    auto* column = new QVBoxLayout(form);
    column->setContentsMargins(16, 2, 12, 12);
    auto* names = new QLabel(selected.join(", "), form);
    names->setWordWrap(true);
    names->setProperty("role", "soft");
    auto* remove = new QPushButton(tr("Delete"), form);
    remove->setObjectName("delete_parts");
    remove->setAccessibleName(tr("Delete %1 parts").arg(selected.size()));
    column->addWidget(names);
    column->addWidget(remove, 0, Qt::AlignLeft);
    connect(remove, &QPushButton::clicked, this, [this, selected] {
        document_.edit(tr("Delete %1 parts").arg(selected.size()), [&](Design& design) {
            std::vector<std::string> refs;
            for (const QString& ref : selected) refs.push_back(ref.toStdString());
            remove_parts(design, refs);
        });
    });
    put(form, tr("%1 parts").arg(selected.size()));
}

} // namespace sinewright::ui
