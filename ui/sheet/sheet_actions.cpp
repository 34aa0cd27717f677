/// What menus and keys do to the selection, and the menus themselves.
#include "core/design/file.hpp"
#include "ui/sheet/editing.hpp"
#include "ui/sheet/reading.hpp"
#include "ui/sheet/sheet.hpp"
#include <QApplication>
#include <QClipboard>
#include <QContextMenuEvent>
#include <QMenu>
#include <QMimeData>
#include <algorithm>

namespace sinewright::ui {

namespace {
template <class F> void add(QMenu& menu, const QString& text, const QString& key, F&& act) {
    QAction* action = menu.addAction(key.isEmpty() ? text : text + QLatin1Char('\t') + key);
    QObject::connect(action, &QAction::triggered, &menu, std::forward<F>(act));
}
} // namespace

void SheetView::turn_selection(int quarters) {
    const auto refs = desk_.selected();
    if (refs.empty()) return;
    desk_.lay_out(tr("Turn %1").arg(named(refs)), [&](Design& d) { turn_parts(d, refs, quarters); });
}

void SheetView::flip_selection(bool upside_down) {
    const auto refs = desk_.selected();
    if (refs.empty()) return;
    desk_.lay_out(tr("Flip %1").arg(named(refs)), [&](Design& d) { flip_parts(d, refs, upside_down); });
}

void SheetView::delete_selection() {
    if (desk_.emphasis.join >= 0) return split_at(desk_.emphasis.join, desk_.emphasis.run);
    const auto refs = desk_.selected();
    if (refs.empty()) return;
    desk_.lay_out(tr("Delete %1").arg(named(refs)), [&](Design& d) { remove_parts(d, refs); });
}

/// Takes out one run of a join: the ends on its two sides part, the side with the name keeps it.
void SheetView::split_at(int join_index, int run) {
    const Join& join = drawing().joins()[static_cast<std::size_t>(join_index)];
    const std::string net = join.net;
    const auto before = pins_before(join.route, run);
    TerminalRefs sides[2];
    bool named_side[2] = {false, false};
    for (std::size_t pin = 0; pin < join.ends.size(); ++pin) {
        const int side = std::find(before.begin(), before.end(), static_cast<int>(pin)) != before.end() ? 0 : 1;
        const JoinEnd& end = join.ends[pin];
        if (end.flag >= 0)
            named_side[side] = true;
        else
            sides[side].push_back(desk_.terminal({Hit::On::terminal, end.part, end.port}));
    }
    const int leaving = named_side[0] != named_side[1]      ? (named_side[0] ? 1 : 0)
                        : sides[0].size() < sides[1].size() ? 0
                                                            : 1;
    const JoinEnd& last = join.ends.back();
    const bool is_stub = last.flag >= 0 && drawing().flags()[static_cast<std::size_t>(last.flag)].stub_of.has_value();
    if (!is_stub && sides[1 - leaving].empty()) {
        const int label = last.flag >= 0 ? drawing().flags()[static_cast<std::size_t>(last.flag)].label : -1;
        if (label < 0)
            emit message(tr("The ring shows where the output is; make another net the output to move it."));
        else
            desk_.lay_out(tr("Take off name %1").arg(text_of(net)),
                          [&](Design& d) { remove_label(d, static_cast<std::size_t>(label)); });
        return;
    }
    const TerminalRefs off = sides[leaving];
    desk_.edit(tr("Part net %1").arg(text_of(net)), [&](Design& d) {
        if (is_stub)
            free_end(d, off.front());
        else
            split(d, net, off);
    });
}

void SheetView::duplicate_selection() {
    const auto refs = desk_.selected();
    if (refs.empty()) return;
    std::vector<std::string> copies;
    desk_.lay_out(tr("Duplicate %1").arg(named(refs)),
                  [&](Design& d) { copies = add_copies(d, excerpt(d, refs), 2 * grid_px, 2 * grid_px); });
    QStringList selection;
    for (const std::string& ref : copies) selection << text_of(ref);
    desk_.document.select(selection);
}

void SheetView::copy_selection() {
    const auto refs = desk_.selected();
    if (refs.empty()) return;
    Design laid = desk_.document.design();
    for (std::size_t p = 0; p < laid.parts.size(); ++p) laid.parts[p].place = desk_.part(static_cast<int>(p)).place;
    auto* mime = new QMimeData;
    const std::string text = design_text(excerpt(laid, refs));
    mime->setData(QLatin1String(parts_mime), QByteArray::fromStdString(text));
    QApplication::clipboard()->setMimeData(mime);
}

void SheetView::cut_selection() {
    const auto refs = desk_.selected();
    if (refs.empty()) return;
    copy_selection();
    desk_.lay_out(tr("Take out %1").arg(named(refs)), [&](Design& d) { remove_parts(d, refs); });
}

void SheetView::paste() {
    const QMimeData* mime = QApplication::clipboard()->mimeData();
    if (!mime || !mime->hasFormat(QLatin1String(parts_mime))) {
        emit message(tr("There are no parts to paste."));
        return;
    }
    const auto read = parse_design(mime->data(QLatin1String(parts_mime)).toStdString(), "clipboard");
    if (!read || read->design.parts.empty()) return;
    QRectF box;
    for (const Part& part : read->design.parts) box |= shape_of(part, place_of(part, {})).reach();
    const QPointF by = sheet_point(nearest_cell(to_sheet(typing_place()) - box.center()));
    std::vector<std::string> copies;
    desk_.lay_out(tr("Paste"), [&](Design& d) { copies = add_copies(d, read->design, by.x(), by.y()); });
    QStringList selection;
    for (const std::string& ref : copies) selection << text_of(ref);
    desk_.document.select(selection);
}

void SheetView::select_all() {
    QStringList all;
    for (const PartShape& part : drawing().parts()) all << text_of(part.ref);
    desk_.document.select(all);
}

void SheetView::contextMenuEvent(QContextMenuEvent* event) {
    if (gesture_) return end_gesture(true);
    QPointF at = to_sheet(event->pos());
    const int chosen = desk_.selected_part();
    const bool by_key = event->reason() == QContextMenuEvent::Keyboard && chosen >= 0;
    if (by_key) at = desk_.part(chosen).body.center();
    QMenu menu(this);
    menu.setObjectName(QStringLiteral("sheet_menu"));
    fill_menu(menu, desk_.hit(at, 12 / zoom_), at);
    menu.exec(by_key ? mapToGlobal(to_view(at).toPoint()) : event->globalPos());
}

void SheetView::fill_menu(QMenu& menu, const Hit& hit, QPointF at) {
    switch (hit.on) {
    case Hit::On::terminal:
        return fill_terminal_menu(menu, hit);
    case Hit::On::value:
    case Hit::On::ref:
    case Hit::On::part:
        return fill_part_menu(menu, hit);
    case Hit::On::run:
    case Hit::On::flag:
        return fill_join_menu(menu, hit, at);
    default:
        return fill_empty_menu(menu, at);
    }
}

void SheetView::fill_part_menu(QMenu& menu, const Hit& hit) {
    const QString ref = text_of(desk_.part(hit.part).ref);
    if (!desk_.document.selection().contains(ref)) desk_.document.select({ref});
    add(menu, tr("Change value"), tr("Enter"), [this, hit] { edit_value(hit.part); });
    add(menu, tr("Change reference"), tr("F2"), [this, hit] { rename_part_at(hit.part); });
    add(menu, tr("Turn right"), tr("Alt+→"), [this] { turn_selection(1); });
    add(menu, tr("Flip upside down"), tr("Alt+↑"), [this] { flip_selection(true); });
    add(menu, tr("Join an end"), tr("Ctrl+J"), [this, hit] { begin(key_join_gesture(desk_, hit.part)); });
    add(menu, tr("Duplicate"), tr("Ctrl+D"), [this] { duplicate_selection(); });
    add(menu, tr("Copy"), tr("Ctrl+C"), [this] { copy_selection(); });
    add(menu, tr("Delete"), tr("Del"), [this] { delete_selection(); });
}

void SheetView::fill_terminal_menu(QMenu& menu, const Hit& hit) {
    const TerminalRef terminal = desk_.terminal(hit);
    const auto net = net_of(desk_.document.design(), terminal);
    if (net && *net != ground_net)
        add(menu, tr("Open the loop here"), {}, [this, terminal] {
            desk_.edit(tr("Open the loop at %1").arg(terminal_text(terminal)),
                       [&](Design& d) { set_cut(d, terminal); });
        });
    if (net != ground_net)
        add(menu, tr("Ground it"), {}, [this, terminal] {
            desk_.try_edit(tr("Ground %1").arg(text_of(terminal.part)), [&](Design& d) { return ground(d, terminal); });
        });
    if (net)
        add(menu, tr("Free this end"), {}, [this, terminal] {
            desk_.edit(tr("Free %1").arg(terminal_text(terminal)), [&](Design& d) { free_end(d, terminal); });
        });
    if (net && *net != ground_net)
        add(menu, tr("Make it the output"), {},
            [this, net] { desk_.edit(tr("Output at %1").arg(text_of(*net)), [&](Design& d) { d.output = *net; }); });
    if (net && *net != ground_net)
        add(menu, tr("Name this net"), {}, [this, hit, net] {
            rename_net_at(*net, sheet_point(desk_.part(hit.part).ports[static_cast<std::size_t>(hit.port)].at));
        });
}

void SheetView::fill_join_menu(QMenu& menu, const Hit& hit, QPointF at) {
    const bool flag = hit.on == Hit::On::flag;
    const std::string net = flag ? drawing().flags()[static_cast<std::size_t>(hit.flag)].net
                                 : drawing().joins()[static_cast<std::size_t>(hit.join)].net;
    add(menu, tr("Name this net"), tr("F2"), [this, net, at] { rename_net_at(net, at); });
    if (net != desk_.document.design().output)
        add(menu, tr("Make it the output"), {},
            [this, net] { desk_.edit(tr("Output at %1").arg(text_of(net)), [&](Design& d) { d.output = net; }); });
    if (!flag) {
        add(menu, tr("Take out this run"), tr("Del"), [this, hit] { split_at(hit.join, hit.run); });
        return;
    }
    const Flag what = drawing().flags()[static_cast<std::size_t>(hit.flag)];
    if (what.label >= 0)
        add(menu, tr("Take off this name"), {}, [this, what] {
            desk_.lay_out(tr("Take off name %1").arg(text_of(what.net)),
                          [&](Design& d) { remove_label(d, static_cast<std::size_t>(what.label)); });
        });
}

void SheetView::fill_empty_menu(QMenu& menu, QPointF) {
    add(menu, tr("Paste"), tr("Ctrl+V"), [this] { paste(); });
    add(menu, tr("Choose all"), tr("Ctrl+A"), [this] { select_all(); });
    add(menu, tr("Show all"), tr("Ctrl+0"), [this] { zoom_to_fit(); });
    add(menu, tr("Type a part"), {}, [this] { open_typed({}); });
}

} // namespace sinewright::ui
