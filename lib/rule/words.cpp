#include "rule/finding.hpp"

namespace onehand {

std::string word_for(verdict v)
{
    switch (v) {
    case verdict::fail:
        return "fail";
    case verdict::not_shown:
        return "not-shown";
    case verdict::marginal:
        return "marginal";
    case verdict::pass:
        return "pass";
    case verdict::not_applicable:
        return "not-applicable";
    }
    return {};
}

std::string word_for(signal_word s)
{
    switch (s) {
    case signal_word::danger:
        return "DANGER";
    case signal_word::warning:
        return "WARNING";
    case signal_word::caution:
        return "CAUTION";
    case signal_word::notice:
        return "NOTICE";
    }
    return {};
}

} // namespace onehand
