#pragma once
/// Loop gain at a cut: true bilateral loop gain L = −(y12 + y21)/(y11 + y22) of the opened circuit, its crossings of
/// arg L = 0, the governing Barkhausen point, the start-up margin and the count of encirclements of +1.
#include "core/analysis/natural_frequencies.hpp"

namespace sinewright {

struct Crossing {
    double frequency_hz = 0;
    double gain = 0;   ///< L there, real and positive
    bool falls = true; ///< arg L falls through 0 (else it rises)
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
/// O(n) a point; a few points are checked against LU of the opened circuit, and everything falls back to LU when they
/// differ by more than 1e-9. Where |L| is so small that the difference loses digits, LU is used as well.
/// Source: return difference, Bode 1945; bilateral double injection, Tian, Visvanathan, Hantgan & Kundert 2001.
class LoopGain {
  public:
    /// @param opened  linearised opened circuit (n+1); x and y the indices of its two sides.
    /// @error no_loop_gain when y11 + y22 vanishes at every frequency (all forward gain inside an ideal op-amp);
    ///        singular_pencil when the joined circuit has no solution at any frequency.
    static Result<LoopGain> prepare(const Pencil& opened, int x, int y);

    /// |D_a/D_c − 1| ≈ 2|L| below which that difference has lost so many digits that the plain form is taken: the ratio
    /// is good to some 1e-14, so this leaves 1e-10 of L.
    static constexpr double small_difference = 1e-4;
    /// Fast form, s in rad/s. A smaller `smallest_difference` trades digits of a small L for speed.
    Complex at(Complex s, double smallest_difference = small_difference) const;
    Complex at_by_lu(Complex s) const; ///< plain form: LU of the opened circuit
    LoopCurve at(std::vector<double> frequencies_hz) const;
    LoopCurve sweep(double from_hz, double to_hz, int points) const; ///< log-spaced, both ends included; 0 < from < to
    /// d ln(D_a/D_c)/ds, from the roots.
    Complex slope_of_log_ratio(Complex s) const;
    /// Roots of D_c (natural frequencies of the joined circuit) and of D_a, rad/s.
    std::vector<Complex> joined_roots() const;
    std::vector<Complex> opposed_roots() const;
    bool falls_back_to_lu() const { return falls_back_; }
    /// Right-half-plane roots of the opened circuit's characteristic polynomial (poles of L); nothing when it can't be
    /// formed.
    std::optional<int> opened_right_half_plane() const;

  private:
    LoopGain() = default;
    static Result<LoopGain> prepare_at_scale(const Pencil& opened, int x, int y, double w0_rad_per_s);
    Complex ratio(Complex s) const;
    Pencil scaled_; ///< opened circuit, equilibrated
    int x_ = -1, y_ = -1;
    double w0_rad_per_s_ = 1;
    std::vector<Complex> joined_roots_, opposed_roots_; ///< in units of w0
    double log_scale_ = 0; ///< ln of k and its sign in D_a/D_c = k Π(s − a)/Π(s − c), roots in units of w0
    double scale_sign_ = 1;
    bool falls_back_ = false;
};

/// All f > 0 where L(jω) is real and positive, rising in frequency. Crossings with |L| below 1e-9 are not quoted.
/// Found on a grid refined round every root, then refined to 1e-13 by LU of the unreduced circuit.
std::vector<Crossing> find_crossings(const LoopGain& loop_gain);

/// Clockwise encirclements of +1 by L(jω), −∞ < ω < ∞, poles on the axis passed on their right: accumulated phase of
/// 1 − L. Equals right-half-plane natural frequencies less right-half-plane poles of L (Nyquist 1932). Nothing when the
/// curve runs through +1 itself.
std::optional<int> count_encirclements(const LoopGain& loop_gain);

struct BarkhausenPoint {
    double frequency_hz = 0, gain = 0, startup_margin_db = 0;
    bool falls = true;
};

struct LoopFinding {
    Cut cut;
    bool cut_chosen = false; ///< the file named none
    std::string cut_reason;  ///< why this one, in words
    std::optional<BarkhausenPoint> barkhausen;
    std::string barkhausen_reason; ///< why there is none
    std::vector<Crossing> crossings;
    std::optional<int> encirclements;           ///< clockwise, of +1
    std::optional<int> opened_right_half_plane; ///< poles of L there
    std::string encirclement_note;              ///< a disagreement of the counts, in words; empty when they agree
    std::string sweep_note;                     ///< how the sweep was computed when not by the fast form
};

/// Governing Barkhausen point by the contract: nearest in log frequency to Im of the right-most complex pair, within a
/// factor of 2.
std::optional<BarkhausenPoint> governing_point(const std::vector<Crossing>& crossings, const SmallSignal& small_signal,
                                               std::string& reason);

/// Candidate cuts of a design in order of preference, with the reason for the first.
/// Prefers a terminal that draws little current, with a finite loop gain and a governing Barkhausen point falling
/// through 0.
struct CutChoice {
    Cut cut;
    std::string reason;
};
Result<CutChoice> choose_cut(const Design& design, const Vector& operating_point, const SmallSignal& small_signal);

} // namespace sinewright
