#pragma once
// A d.c. network of ideal elements on plain SI numbers, every value a box it may lie in, and the extremes of its voltages, currents and powers over
// all boxes at once. In a linear network each node voltage, and a held set point, is a ratio of two affine functions of any one conductance and
// affine in every source: its extremes lie on corners, which are enumerated. Not on corners: a resistance's own power (peaks at the match), and a
// track's wiper, whose two halves are one variable (both extremes are found in closed form). Where there are too many parameters to enumerate the
// figure is searched, widened by a stated margin and says so. Node 0 is the return.
#include <optional>
#include <vector>

namespace onehand::circuit {

/// A value and where it may lie; low <= high. A resistance may reach from 0 to infinity (unknown).
struct box {
    double low = 0.0;
    double high = 0.0;

    bool point() const { return low == high; }
};

enum class form { open, closed, resistance, clamp, current, fixed }; // fixed: an ideal voltage either way, inside the room

/// One form that a branch may take: ohm, volt (from above to; it carries current from -> to only, and stands beside `open`) or ampere (from -> to).
struct option {
    form is = form::open;
    box at;
};

struct branch {
    int from = 0;
    int to = 0;
    std::vector<option> options; // any one of them may be the case
};

/// A trimmer's track: `position` of the resistance lies between end_1 and the wiper, the rest between wiper and end_2.
struct track {
    int end_1 = 0;
    int wiper = 0;
    int end_2 = 0;
    box resistance;
    box position;
};

/// An ideal source: plus above minus, without a loop. One that hangs on nothing fixes the difference of its nodes only.
struct source {
    int plus = 0;
    int minus = 0;
    box volts;
};

/// An output adjusted so that `sense` stands `threshold` above `reference`; `bias` flows out of the sense node.
struct held_output {
    int plus = 0;
    int minus = 0;
    int sense = 0;
    int reference = 0;
    box threshold;
    box bias;
};

struct network {
    int nodes = 1;
    std::vector<branch> branches;
    std::vector<track> tracks;
    std::vector<source> sources;
    std::optional<held_output> held;
};

/// Extremes of one figure. `margin`: relative widening of a searched one, already in low and high.
struct extreme {
    double low = 0.0;
    double high = 0.0;
    bool known = false; // false: floating in every case, or the branch has no such figure
    bool searched = false;
    double margin = 0.0;
};

/// The end of a parameter's box that gives the output's low and high.
struct output_end {
    enum class of { branch, track, track_position, source, threshold, bias };
    of what = of::branch;
    int index = 0;
    char at_low = ' '; // 'l' low end, 'h' high end, 'i' inside
    char at_high = ' ';
};

struct solution {
    bool feedback_lost = false; // at some setting the sense no longer depends on the output, or no output above zero holds it
    extreme output;             // of the held output
    std::vector<output_end> set_by;
    std::vector<bool> floating;                // per node: in some case nothing holds it
    std::vector<std::vector<bool>> together;   // [a][b]: in every case both are held, or float as one island: their difference is told in all cases
    std::vector<std::vector<extreme>> voltage; // [a][b]: a above b, cases in which either floats not counted
    std::vector<extreme> current;              // per branch, from -> to
    std::vector<extreme> power;                // per branch, in its resistance or clamp
    std::vector<extreme> track_current;        // the greater section's magnitude
    std::vector<extreme> track_power;          // whole track
};

solution solve(const network& n);

} // namespace onehand::circuit
