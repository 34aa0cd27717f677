#pragma once
/// Loop gain at a cut: true bilateral loop gain L = −(y12 + y21)/(y11 + y22) of the opened circuit, its crossings of
/// arg L = 0, the governing Barkhausen point, the start-up margin and the count of encirclements of +1.
#include "core/analysis/natural_frequencies.hpp"

namespace sinewright {

struct Crossing {
    double frequency_hz = 0;
    double gain = 0;    ///< L there, real and positive
    bool falls = true;  ///< arg L falls through 0 (else it rises)
    double startup_margin_db() const;
};

struct LoopCurve {
    std::vector<double> frequency_hz;
    std::vector<Complex> gain;
};

/// L(s) of one cut, prepared once, cheap at every frequency.
///
/// With M the opened circuit's pencil and x, y its two sides, D_c = det of the joined circuit (v_x = v_y) and
/// D_a = det with the sides joined in opposition (v_x = −v_y): L = (D_a − D_c)/(D_a + D_c), because
/// D_c ∝ y11+y12+y21+y22 and D_a ∝ y11−y12−y21+y22. Both determinants are products over their roots, so a sweep costs
/// O(n) a point; a few points are checked against LU of the opened circuit, and the sweep falls back to LU when they
/// differ by more than 1e-9.
/// Source: return difference, Bode 1945; bilateral double injection, Tian, Visvanathan, Hantgan & Kundert 2001.
class LoopGain {
  public:
    /// @param opened  linearised opened circuit (n+1); x and y the indices of its two sides.
    /// @error no_loop_gain when y11 + y22 vanishes at every frequency (all forward gain inside an ideal op-amp).
    static Result<LoopGain> prepare(const Pencil& opened, int x, int y);

    Complex at(Complex s) const;                     ///< fast form
    Complex at_by_lu(Complex s) const;               ///< plain form: LU of the opened circuit
    LoopCurve sweep(double from_hz, double to_hz, int points) const; ///< log-spaced, both ends included
    LoopCurve at(std::vector<double> frequencies_hz) const;
    const std::vector<Complex>& natural_frequencies() const { return closed_roots_; } ///< right-most first
    bool falls_back_to_lu() const { return falls_back_; }
    std::vector<Crossing> crossings() const;         ///< all f > 0 with L real and positive, rising in frequency
    /// Clockwise-counted encirclements of +1 by L(jω), −∞ < ω < ∞, from accumulated phase of 1 − L.
    int encirclements_by_phase() const;
    /// Right-half-plane roots of the opened circuit's characteristic polynomial (poles of L); nothing when it cannot be formed.
    std::optional<int> opened_right_half_plane() const;

  private:
    LoopGain() = default;
    Pencil opened_;
    int x_ = -1, y_ = -1;
    double load_siemens_ = 1;              ///< termination used by the plain form
    std::vector<Complex> closed_roots_, opposed_roots_;
    double log_ratio_ = 0;                 ///< log |k| of D_a/D_c = k Π(s − a)/Π(s − c)
    int ratio_sign_ = 1;
    bool falls_back_ = false;
};

struct BarkhausenPoint {
    double frequency_hz = 0, gain = 0, startup_margin_db = 0;
    bool falls = true;
};

struct LoopFinding {
    Cut cut;
    bool cut_chosen = false;    ///< the file named none
    std::string cut_reason;     ///< why this one, in words
    std::optional<BarkhausenPoint> barkhausen;
    std::string barkhausen_reason; ///< why there is none
    std::vector<Crossing> crossings;
    std::optional<int> encirclements;    ///< of +1
    std::string encirclement_note;       ///< a disagreement of the counts, in words; empty when they agree
    std::string sweep_note;              ///< how the sweep was computed when not by the fast form
};

/// Governing Barkhausen point by the contract: nearest in log frequency to Im of the right-most complex pair, within a
/// factor of 2.
std::optional<BarkhausenPoint> governing_point(const std::vector<Crossing>& crossings, const SmallSignal& small_signal,
                                               std::string& reason);

/// Candidate cuts of a design in order of preference, with the reason for the first.
/// Prefers a terminal that draws little current, with a finite loop gain and a governing Barkhausen point falling through 0.
struct CutChoice {
    Cut cut;
    std::string reason;
};
Result<CutChoice> choose_cut(const Design& design, const Circuit& circuit, const Vector& operating_point,
                             const SmallSignal& small_signal);

} // namespace sinewright
