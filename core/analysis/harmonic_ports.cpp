#include "core/analysis/harmonic_ports.hpp"
#include <cmath>

namespace sinewright {

namespace {

/// Two combinations are one port when they agree to rounding of the weights.
constexpr double same_combination = 1e-12;

/// Finds or adds the combination among the columns of `ports`; the factor is what the combination is of the column.
int port_of(const Combination& combination, std::vector<Vector>& ports, int unknowns, double& factor) {
    Vector v = Vector::Zero(unknowns);
    for (const auto& [index, weight] : combination)
        if (index >= 0) v[index] += weight;
    int largest = 0;
    const double size = v.size() ? v.cwiseAbs().maxCoeff(&largest) : 0;
    factor = 0;
    if (size == 0) return -1;
    for (std::size_t k = 0; k < ports.size(); ++k) {
        if (ports[k][largest] == 0) continue;
        factor = v[largest] / ports[k][largest];
        if ((v - factor * ports[k]).cwiseAbs().maxCoeff() <= same_combination * size) return static_cast<int>(k);
    }
    factor = 1;
    ports.push_back(std::move(v));
    return static_cast<int>(ports.size()) - 1;
}

Matrix columns(const std::vector<Vector>& ports, int unknowns) {
    Matrix m(unknowns, static_cast<int>(ports.size()));
    for (std::size_t k = 0; k < ports.size(); ++k) m.col(static_cast<int>(k)) = ports[k];
    return m;
}

} // namespace

Ports::Ports(const Circuit& circuit, const Vector& x_rest)
    : G(circuit.G), C(circuit.C), linear_pattern(circuit.G.cwiseAbs() + circuit.C.cwiseAbs()) {
    std::vector<Vector> controls, injections;
    for (const Element& element : circuit.elements) {
        Use use;
        use.law = element.law;
        for (const Combination& control : element.controls) {
            double factor;
            use.control.push_back(port_of(control, controls, circuit.size(), factor));
            use.control_weight.push_back(factor);
        }
        for (const Combination& injection : element.injections) {
            double factor;
            use.output.push_back(port_of(injection, injections, circuit.size(), factor));
            use.output_weight.push_back(factor);
        }
        stores_charge_ = stores_charge_ || element.law->stores_charge();
        uses_.push_back(std::move(use));
    }
    A = columns(controls, circuit.size());
    B = columns(injections, circuit.size());
    Eigen::MatrixXi number = Eigen::MatrixXi::Constant(outputs(), this->controls(), -1);
    limiting_scale = Vector::Zero(this->controls());
    for (Use& use : uses_) {
        for (const int o : use.output)
            for (const int c : use.control) {
                if (o >= 0 && c >= 0 && number(o, c) < 0) {
                    number(o, c) = static_cast<int>(pairs_.size());
                    pairs_.push_back({o, c});
                }
                use.pair.push_back(o >= 0 && c >= 0 ? number(o, c) : -1);
            }
        for (std::size_t k = 0; k < use.control.size(); ++k) {
            const double scale = use.law->limiting_scale_v(static_cast<int>(k));
            if (use.control[k] < 0 || scale <= 0) continue;
            double& least = limiting_scale[use.control[k]];
            const double here = scale / std::abs(use.control_weight[k]);
            least = least > 0 ? std::min(least, here) : here;
        }
    }
    u_rest = A.transpose() * x_rest;
    find_rest();
}

void Ports::find_rest() {
    const int pairs = static_cast<int>(pairs_.size());
    i_rest = q_rest = Vector::Zero(outputs());
    di_rest = dq_rest = Vector::Zero(pairs);
    PortSamples rest;
    evaluate(Matrix::Zero(1, controls()), 1, true, rest);
    i_rest = rest.i.row(0);
    q_rest = rest.q.row(0);
    di_rest = rest.di.row(0);
    dq_rest = rest.dq.row(0);
    for (int k = 0; k < pairs; ++k) {
        const auto [o, c] = pairs_[k];
        G += di_rest[k] * B.col(o) * A.col(c).transpose();
        C += dq_rest[k] * B.col(o) * A.col(c).transpose();
    }
}

void Ports::gather(const Use& use, const Matrix& du, int count, std::vector<double>& u) const {
    u.resize(use.control.size() * count);
    for (std::size_t k = 0; k < use.control.size(); ++k) {
        double* to = u.data() + k * count;
        const int port = use.control[k];
        if (port < 0) {
            std::fill(to, to + count, 0.0);
            continue;
        }
        const double weight = use.control_weight[k], rest = u_rest[port];
        const double* from = du.data() + port * du.rows();
        for (int n = 0; n < count; ++n) to[n] = weight * (rest + from[n]);
    }
}

void Ports::evaluate(const Matrix& du, int count, bool derivatives, PortSamples& out) const {
    const int rows = static_cast<int>(du.rows()), pairs = static_cast<int>(pairs_.size());
    out.i.resize(rows, outputs()), out.q.resize(rows, outputs());
    out.i.topRows(count) = (-i_rest.transpose()).replicate(count, 1);
    out.q.topRows(count) = (-q_rest.transpose()).replicate(count, 1);
    if (derivatives) {
        out.di.resize(rows, pairs), out.dq.resize(rows, pairs);
        out.di.topRows(count) = (-di_rest.transpose()).replicate(count, 1);
        out.dq.topRows(count) = (-dq_rest.transpose()).replicate(count, 1);
    }
    for (int k = 0; k < pairs; ++k) {
        const auto [o, c] = pairs_[k];
        if (di_rest[k] != 0) out.i.col(o).head(count) -= di_rest[k] * du.col(c).head(count);
        if (dq_rest[k] != 0) out.q.col(o).head(count) -= dq_rest[k] * du.col(c).head(count);
    }
    std::vector<double> u, i, di, q, dq;
    for (const Use& use : uses_) {
        const int nc = use.law->controls(), no = use.law->outputs();
        const bool charge = use.law->stores_charge();
        gather(use, du, count, u);
        i.resize(no * count);
        LawSamples samples{.count = count, .u = u.data(), .i = i.data()};
        if (derivatives) di.resize(no * nc * count), samples.di = di.data();
        if (charge) q.resize(no * count), samples.q = q.data();
        if (charge && derivatives) dq.resize(no * nc * count), samples.dq = dq.data();
        use.law->evaluate(samples);
        const auto add = [count](auto&& column, const std::vector<double>& from, int block, double weight) {
            column.head(count) += weight * Eigen::Map<const Vector>(from.data() + block * count, count);
        };
        for (int o = 0; o < no; ++o) {
            if (use.output[o] < 0) continue;
            add(out.i.col(use.output[o]), i, o, use.output_weight[o]);
            if (charge) add(out.q.col(use.output[o]), q, o, use.output_weight[o]);
            for (int c = 0; derivatives && c < nc; ++c) {
                const int pair = use.pair[o * nc + c];
                if (pair < 0) continue;
                const double weight = use.output_weight[o] * use.control_weight[c];
                add(out.di.col(pair), di, o * nc + c, weight);
                if (charge) add(out.dq.col(pair), dq, o * nc + c, weight);
            }
        }
    }
}

} // namespace sinewright
