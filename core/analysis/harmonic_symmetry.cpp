#include "core/analysis/harmonic_symmetry.hpp"
#include <algorithm>
#include <cmath>
#include <limits>
#include <numeric>

namespace sinewright {

namespace {

/// Even and odd parts of a response are told apart down to this part of it: below the −200 dB that a floor is read at.
constexpr double symmetric_to = 1e-12;
/// More pieces than this do not occur in loops of this size; then no symmetry is assumed.
constexpr int most_pieces = 10;
constexpr int trials_each_size = 6;

/// Pieces of the linear network: rows and columns that G or C ties together.
struct Pieces {
    std::vector<int> parent; ///< rows 0 … n−1, columns n … 2n−1

    explicit Pieces(int n) : parent(2 * n) { std::iota(parent.begin(), parent.end(), 0); }
    int find(int k) {
        while (parent[k] != k) k = parent[k] = parent[parent[k]];
        return k;
    }
    void join(int a, int b) { parent[find(a)] = find(b); }
};

/// The one piece that all non-zero entries of a port's combination lie in; −1 when they lie in several.
int piece_of(const Eigen::VectorXd& combination, int offset, Pieces& pieces) {
    int piece = -1;
    for (int k = 0; k < combination.size(); ++k) {
        if (combination[k] == 0) continue;
        const int here = pieces.find(offset + k);
        if (piece >= 0 && piece != here) pieces.join(here, piece);
        piece = pieces.find(offset + k);
    }
    return piece;
}

/// Deviations of many sizes, structureless but always the same.
Matrix trial_deviations(const Ports& ports) {
    constexpr int sizes = 16;
    Matrix du(sizes * trials_each_size, ports.controls());
    for (int k = 0; k < du.rows(); ++k) {
        const double size = std::pow(10.0, -4 + 0.4 * (k / trials_each_size));
        for (int c = 0; c < du.cols(); ++c) du(k, c) = size * std::sin(1 + 2.399963 * k + 1.7 * c * (k + 1));
    }
    return du;
}

/// What rounding leaves of a response: derivatives times the size of the controls, rest included.
Matrix rounding_of(const Ports& ports, const Matrix& du, const PortSamples& response) {
    constexpr double epsilon = 32 * std::numeric_limits<double>::epsilon();
    Matrix noise = epsilon * (ports.i_rest + ports.q_rest).cwiseAbs().transpose().replicate(du.rows(), 1);
    for (std::size_t k = 0; k < ports.pairs().size(); ++k) {
        const auto [o, c] = ports.pairs()[k];
        const auto slope = (response.di.col(k).array() + ports.di_rest[k]).abs() +
                           (response.dq.col(k).array() + ports.dq_rest[k]).abs();
        noise.col(o).array() += epsilon * slope * (du.col(c).array().abs() + std::abs(ports.u_rest[c]));
    }
    return noise;
}

/// i(u₀ + S δ) = s·i(u₀ + δ) for every trial, judged within each size of deviation.
bool agrees(const Matrix& straight, const Matrix& mirrored, const Matrix& noise, int output, int sign) {
    for (int from = 0; from + trials_each_size <= straight.rows(); from += trials_each_size) {
        const auto a = straight.col(output).segment(from, trials_each_size),
                   b = mirrored.col(output).segment(from, trials_each_size);
        const double size = std::max(a.cwiseAbs().maxCoeff(), b.cwiseAbs().maxCoeff());
        const double rounding = noise.col(output).segment(from, trials_each_size).maxCoeff();
        if (!std::isfinite(size)) continue;
        if ((b - sign * a).cwiseAbs().maxCoeff() > symmetric_to * size + rounding) return false;
    }
    return true;
}

/// The elements' answer to the deviations with each control turned by its sign, against the straight answer.
bool holds_for(const Ports& ports, const HalfWave& signs, const Matrix& du, const PortSamples& straight,
               const Matrix& noise) {
    Matrix turned = du;
    for (int c = 0; c < ports.controls(); ++c) turned.col(c) *= signs.control[c];
    PortSamples mirrored;
    ports.evaluate(turned, static_cast<int>(du.rows()), false, mirrored);
    for (int o = 0; o < ports.outputs(); ++o)
        if (!agrees(straight.i, mirrored.i, noise, o, signs.output[o]) ||
            !agrees(straight.q, mirrored.q, noise, o, signs.output[o]))
            return false;
    return true;
}

} // namespace

HalfWave find_half_wave_symmetry(const Ports& ports, int observed, int joined_a, int joined_b) {
    const int n = static_cast<int>(ports.G.rows());
    Pieces pieces(n);
    for (int r = 0; r < n; ++r)
        for (int c = 0; c < n; ++c)
            if (ports.linear_pattern(r, c) != 0) pieces.join(r, n + c);
    if (joined_a >= 0) pieces.join(joined_a, joined_b), pieces.join(n + joined_a, n + joined_b);

    for (int c = 0; c < ports.controls(); ++c) piece_of(ports.A.col(c), n, pieces);
    for (int o = 0; o < ports.outputs(); ++o) piece_of(ports.B.col(o), 0, pieces);
    std::vector<int> roots, control_piece, output_piece;
    const auto number = [&](int root) {
        const auto at = std::find(roots.begin(), roots.end(), root);
        if (at != roots.end()) return static_cast<int>(at - roots.begin());
        roots.push_back(root);
        return static_cast<int>(roots.size()) - 1;
    };
    number(pieces.find(n + observed)); // piece 0 is odd
    for (int c = 0; c < ports.controls(); ++c) control_piece.push_back(number(piece_of(ports.A.col(c), n, pieces)));
    for (int o = 0; o < ports.outputs(); ++o) output_piece.push_back(number(piece_of(ports.B.col(o), 0, pieces)));
    if (static_cast<int>(roots.size()) > most_pieces) return {};

    const Matrix du = trial_deviations(ports);
    PortSamples straight;
    ports.evaluate(du, static_cast<int>(du.rows()), true, straight);
    const Matrix noise = rounding_of(ports, du, straight);
    for (int assignment = 0; assignment < 1 << (roots.size() - 1); ++assignment) {
        const auto sign = [&](int piece) { return piece > 0 && (assignment >> (piece - 1)) & 1 ? 1 : -1; };
        HalfWave found;
        found.holds = true;
        for (const int piece : control_piece) found.control.push_back(sign(piece));
        for (const int piece : output_piece) found.output.push_back(sign(piece));
        if (holds_for(ports, found, du, straight, noise)) return found;
    }
    return {};
}

} // namespace sinewright
