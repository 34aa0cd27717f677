#include "ui/sheet/auto_place.hpp"
#include <algorithm>
#include <climits>
#include <cmath>
#include <cstdlib>
#include <set>

namespace sinewright::ui {

namespace {

constexpr std::size_t most_refined = 120; // parts; larger designs keep their rows
constexpr int step_cost = 10, bend_cost = 25, hit_cost = 60, crowd_cost = 12, overlap_cost = 600;

struct Box {
    int left, top, right, bottom;
    Box moved(Cell by) const { return {left + by.x, top + by.y, right + by.x, bottom + by.y}; }
    Box grown(int by) const { return {left - by, top - by, right + by, bottom + by}; }
};
int shared_area(const Box& a, const Box& b) {
    const int w = std::min(a.right, b.right) - std::max(a.left, b.left) + 1;
    const int h = std::min(a.bottom, b.bottom) - std::max(a.top, b.top) + 1;
    return w > 0 && h > 0 ? w * h : 0;
}
/// A horizontal or vertical run meets a box.
bool meets(Cell a, Cell b, const Box& box) {
    return std::max(a.x, b.x) >= box.left && std::min(a.x, b.x) <= box.right && std::max(a.y, b.y) >= box.top &&
           std::min(a.y, b.y) <= box.bottom;
}

/// A part in one of its orientations, about its centre.
struct Form {
    Place turned;
    Box body{};  ///< what runs go round
    Box whole{}; ///< with the leads
    Box roomy{}; ///< with room for texts and runs
    std::vector<Pin> pins;
};
struct Piece {
    std::vector<Form> forms;
    std::vector<int> nets; ///< per pin; −1: unconnected, −2: gnd
    bool fixed = false;
    Cell at;
    int form = 0;
    const Form& now() const { return forms[static_cast<std::size_t>(form)]; }
    Box body() const { return now().body.moved(at); }
    Box whole() const { return now().whole.moved(at); }
    Pin pin(std::size_t i) const {
        const Pin& p = now().pins[i];
        return {{p.at.x + at.x, p.at.y + at.y}, p.out};
    }
};
struct End {
    std::size_t piece, pin;
};

/// Orientations in which a symbol reads well.
std::vector<Place> orientations(const Symbol& symbol) {
    const Place upright{}, mirrored{0, 0, 0, true}, upside_down{0, 0, 180, true};
    if (symbol.kind == "opamp") return {upright, upside_down};
    const bool one_way =
        !symbol.ports.empty() && (symbol.ports[0].terminal == "in" || symbol.ports[0].terminal == "sense");
    if (one_way) return {upright, mirrored};
    if (symbol.ports.size() == 2 && symbol.ports[0].out != Way::up)
        return {upright, {0, 0, 90, false}, {0, 0, 180, false}, {0, 0, 270, false}};
    if (symbol.kind == "supply") return {upright, {0, 0, 180, false}};
    if (symbol.ports.size() == 3 && symbol.body.width() < 60) {
        std::vector<Place> all;
        for (int turn = 0; turn < 360; turn += 90)
            all.push_back({0, 0, turn, false}), all.push_back({0, 0, turn, true});
        return all;
    }
    return {upright, mirrored};
}

Form form_of(const Symbol& symbol, const Place& turned) {
    Form form{turned, {}, {}, {}, {}};
    QTransform transform;
    transform.rotate(turned.turn);
    transform.scale(turned.flip ? -1 : 1, 1);
    const auto take = [](Box& box, Cell c) {
        box = {std::min(box.left, c.x), std::min(box.top, c.y), std::max(box.right, c.x), std::max(box.bottom, c.y)};
    };
    for (Cell c : cells_under(transform.mapRect(symbol.body))) take(form.body, c);
    form.whole = form.body;
    for (const Port& port : symbol.ports) {
        form.pins.push_back({oriented(port.at, turned), oriented(port.out, turned)});
        take(form.whole, form.pins.back().at);
    }
    const bool upright = form.whole.bottom - form.whole.top > form.whole.right - form.whole.left;
    form.roomy = form.whole.grown(1); // and room for the text: beside an upright part, above a level one
    if (upright && symbol.ports.size() == 2)
        form.roomy.right += 2;
    else if (!symbol.has_face)
        form.roomy.top -= 1;
    else
        form.roomy.bottom += 1;
    return form;
}

/// Fewest bends of a run that leaves `a` and reaches `b` the way their leads point.
int bends(const Pin& a, const Pin& b) {
    const Cell d{b.at.x - a.at.x, b.at.y - a.at.y};
    const Cell from = stepped({0, 0}, a.out), to = stepped({0, 0}, b.out);
    const int ahead_a = from.x * d.x + from.y * d.y, ahead_b = -(to.x * d.x + to.y * d.y);
    if (a.out == Way::any || b.out == Way::any) return d.x == 0 || d.y == 0 ? 0 : 1;
    const bool straight = d.x == 0 || d.y == 0;
    if (straight && ahead_a > 0 && ahead_b > 0) return 0;
    const bool square = from.x * to.x + from.y * to.y == 0;
    if (square) return ahead_a > 0 && ahead_b > 0 ? 1 : ahead_a >= 0 && ahead_b >= 0 ? 2 : 3;
    const bool same_way = a.out == b.out;
    if (same_way) return 2;
    return ahead_a > 0 && ahead_b > 0 ? 2 : 4;
}

class Arrangement {
  public:
    Arrangement(const Design& design);
    void rows();
    void refine();
    Places places(const Design& design) const;

  private:
    int cost() const;
    int net_cost(const std::vector<End>& ends, std::size_t net) const;
    int run_cost(const Pin& a, const Pin& b) const;
    int crowding() const;
    bool change(Piece& piece, std::size_t index, int reach);
    int random(int below);
    std::vector<std::size_t> signal_order() const;

    std::vector<Piece> pieces_;
    std::vector<std::vector<End>> nets_;
    int output_ = -1;
    std::uint32_t random_ = 0x9E3779B9u;
};

Arrangement::Arrangement(const Design& design) {
    const std::vector<std::string> names = nets_of(design);
    nets_.resize(names.size());
    const auto net_index = [&](const std::optional<std::string>& net) {
        if (!net) return -1;
        if (*net == ground_net) return -2;
        return static_cast<int>(std::find(names.begin(), names.end(), *net) - names.begin());
    };
    if (!design.output.empty()) output_ = net_index(design.output);
    if (output_ >= static_cast<int>(names.size())) output_ = -1;
    for (const Part& part : design.parts) {
        const Symbol& symbol = symbol_of(part.kind);
        Piece piece;
        piece.fixed = part.place.has_value();
        if (piece.fixed) {
            const Place place = place_of(part, {});
            piece.at = nearest_cell({place.x, place.y});
            piece.forms.push_back(form_of(symbol, {0, 0, place.turn, place.flip}));
        } else {
            for (const Place& turned : orientations(symbol)) piece.forms.push_back(form_of(symbol, turned));
        }
        for (std::size_t i = 0; i < symbol.ports.size(); ++i) {
            piece.nets.push_back(net_index(part.net_at(symbol.ports[i].terminal)));
            if (piece.nets.back() >= 0)
                nets_[static_cast<std::size_t>(piece.nets.back())].push_back({pieces_.size(), i});
        }
        pieces_.push_back(std::move(piece));
    }
}

int Arrangement::random(int below) { // xorshift (Marsaglia 2003)
    random_ ^= random_ << 13, random_ ^= random_ >> 17, random_ ^= random_ << 5;
    return static_cast<int>(random_ % static_cast<std::uint32_t>(below));
}

/// Parts in the order a signal meets them, beginning at the output.
std::vector<std::size_t> Arrangement::signal_order() const {
    std::vector<std::size_t> order;
    std::vector<bool> seen(pieces_.size(), false);
    const auto visit = [&](std::size_t piece) {
        if (!seen[piece]) seen[piece] = true, order.push_back(piece);
    };
    if (output_ >= 0)
        for (const End& end : nets_[static_cast<std::size_t>(output_)]) visit(end.piece);
    for (std::size_t next = 0, first = 0; order.size() < pieces_.size() || next < order.size();) {
        if (next == order.size()) {
            while (seen[first]) ++first;
            visit(first);
        }
        for (const int net : pieces_[order[next]].nets)
            if (net >= 0)
                for (const End& end : nets_[static_cast<std::size_t>(net)]) visit(end.piece);
        ++next;
    }
    return order;
}

void Arrangement::rows() {
    int bottom = 0;
    bool any_fixed = false;
    for (const Piece& piece : pieces_)
        if (piece.fixed)
            bottom = any_fixed ? std::max(bottom, piece.whole().bottom) : piece.whole().bottom, any_fixed = true;
    const int columns = std::max(3, static_cast<int>(std::lround(std::sqrt(double(pieces_.size()) * 1.3))));
    int place = 0;
    for (const std::size_t index : signal_order()) {
        Piece& piece = pieces_[index];
        if (piece.fixed) continue;
        piece.at = {(place % columns) * 11, (place / columns) * 9 + (any_fixed ? bottom + 8 : 0)};
        ++place;
    }
}

int Arrangement::run_cost(const Pin& a, const Pin& b) const {
    const int length = std::abs(a.at.x - b.at.x) + std::abs(a.at.y - b.at.y);
    if (length == 0) return bend_cost; // ends on top of each other are hard to read
    const Cell corner_1{b.at.x, a.at.y}, corner_2{a.at.x, b.at.y};
    int hits_1 = 0, hits_2 = 0;
    for (const Piece& piece : pieces_) {
        const Box box = piece.body();
        hits_1 += meets(a.at, corner_1, box) + meets(corner_1, b.at, box);
        hits_2 += meets(a.at, corner_2, box) + meets(corner_2, b.at, box);
    }
    return length * step_cost + bends(a, b) * bend_cost + std::min(hits_1, hits_2) * hit_cost;
}

/// Shortest tree over the net's ends (Prim 1957).
int Arrangement::net_cost(const std::vector<End>& ends, std::size_t net) const {
    std::vector<Pin> pins;
    for (const End& end : ends) pins.push_back(pieces_[end.piece].pin(end.pin));
    int total = 0;
    if (static_cast<int>(net) == output_) { // the ring stands to the right of everything on its net
        int right = INT_MIN, y = 0;
        for (const Pin& pin : pins)
            if (pin.at.x > right) right = pin.at.x, y = pin.at.y;
        if (!pins.empty()) pins.push_back({{right + 3, y}, Way::any});
    }
    std::vector<int> nearest(pins.size(), INT_MAX);
    std::vector<bool> joined(pins.size(), false);
    std::size_t last = 0;
    for (std::size_t n = 1; n < pins.size(); ++n) {
        joined[last] = true;
        std::size_t best = 0;
        for (std::size_t p = 0; p < pins.size(); ++p) {
            if (joined[p]) continue;
            nearest[p] = std::min(nearest[p], run_cost(pins[last], pins[p]));
            if (joined[best] || nearest[p] < nearest[best]) best = p;
        }
        total += nearest[best];
        last = best;
    }
    return total;
}

int Arrangement::crowding() const {
    int total = 0;
    Box all{INT_MAX, INT_MAX, INT_MIN, INT_MIN};
    for (std::size_t i = 0; i < pieces_.size(); ++i) {
        const Box box = pieces_[i].whole(), roomy = pieces_[i].now().roomy.moved(pieces_[i].at);
        all = {std::min(all.left, box.left), std::min(all.top, box.top), std::max(all.right, box.right),
               std::max(all.bottom, box.bottom)};
        for (std::size_t j = i + 1; j < pieces_.size(); ++j) {
            if (const int near = shared_area(roomy, pieces_[j].now().roomy.moved(pieces_[j].at)))
                total += near * crowd_cost;
            if (const int both = shared_area(box, pieces_[j].whole())) total += both * overlap_cost;
        }
        for (std::size_t p = 0; p < pieces_[i].nets.size(); ++p) {
            if (pieces_[i].nets[p] != -2) continue;
            const Pin pin = pieces_[i].pin(p);
            total += pin.out == Way::down ? 0 : pin.out == Way::up ? 200 : 130;
            const Cell foot = stepped(pin.at, pin.out, 2);
            for (std::size_t j = 0; j < pieces_.size(); ++j)
                if (j != i && meets(pin.at, foot, pieces_[j].whole())) total += overlap_cost;
        }
    }
    return total + 3 * (all.right - all.left) + 5 * (all.bottom - all.top);
}

int Arrangement::cost() const {
    int total = crowding();
    for (std::size_t net = 0; net < nets_.size(); ++net) total += net_cost(nets_[net], net);
    for (const Piece& piece : pieces_) total += piece.form > 0 && piece.now().turned.flip ? 30 : 0;
    return total;
}

bool Arrangement::change(Piece& piece, std::size_t index, int reach) {
    const int kind = random(10);
    if (kind < 4) {
        piece.at.x += random(2 * reach + 1) - reach, piece.at.y += random(2 * reach + 1) - reach;
    } else if (kind < 6) {
        piece.form = random(static_cast<int>(piece.forms.size()));
    } else { // set one end down in front of another end of its net
        const std::size_t p = static_cast<std::size_t>(random(static_cast<int>(piece.nets.size())));
        if (piece.nets[p] < 0) return false;
        const auto& ends = nets_[static_cast<std::size_t>(piece.nets[p])];
        const End& other = ends[static_cast<std::size_t>(random(static_cast<int>(ends.size())))];
        if (other.piece == index) return false;
        if (kind == 9) piece.form = random(static_cast<int>(piece.forms.size()));
        const Pin target = pieces_[other.piece].pin(other.pin);
        const Way way = random(3) == 0 ? static_cast<Way>(random(4)) : target.out;
        const Cell goal = stepped(target.at, way, 2 + random(5));
        const Pin mine = piece.pin(p);
        piece.at.x += goal.x - mine.at.x, piece.at.y += goal.y - mine.at.y;
    }
    return true;
}

void Arrangement::refine() {
    std::vector<std::size_t> loose;
    for (std::size_t i = 0; i < pieces_.size(); ++i)
        if (!pieces_[i].fixed && !pieces_[i].nets.empty()) loose.push_back(i);
    if (loose.empty() || pieces_.size() > most_refined) return;
    const int tries = std::clamp(static_cast<int>(400000 / pieces_.size()), 3000, 40000);
    int now = cost(), best = now;
    std::vector<Piece> best_pieces = pieces_;
    for (int i = 0; i < tries; ++i) {
        const int threshold = 220 * (tries - i) / tries * (tries - i) / tries;
        const std::size_t index = loose[static_cast<std::size_t>(random(static_cast<int>(loose.size())))];
        Piece& piece = pieces_[index];
        const Cell at = piece.at;
        const int form = piece.form;
        if (!change(piece, index, 2 + 8 * (tries - i) / tries)) continue;
        const int then = cost();
        if (then - now > threshold) {
            piece.at = at, piece.form = form;
            continue;
        }
        now = then;
        if (now < best) best = now, best_pieces = pieces_;
    }
    pieces_ = best_pieces;
}

Places Arrangement::places(const Design& design) const {
    Places result;
    for (std::size_t i = 0; i < pieces_.size(); ++i) {
        if (pieces_[i].fixed) continue;
        Place place = pieces_[i].now().turned;
        place.x = double(pieces_[i].at.x) * grid_px, place.y = double(pieces_[i].at.y) * grid_px;
        result[design.parts[i].ref] = place;
    }
    return result;
}

} // namespace

Places auto_places(const Design& design) {
    if (std::all_of(design.parts.begin(), design.parts.end(), [](const Part& p) { return p.place.has_value(); }))
        return {};
    Arrangement arrangement(design);
    arrangement.rows();
    arrangement.refine();
    return arrangement.places(design);
}

} // namespace sinewright::ui
