// Own main: a run that matches no test case fails, so that an empty run cannot look green.
#define DOCTEST_CONFIG_IMPLEMENT
#include <doctest/doctest.h>

namespace {

unsigned matched = 0;

struct match_counter : doctest::IReporter {
    explicit match_counter(const doctest::ContextOptions&) {}
    void report_query(const doctest::QueryData&) override {}
    void test_run_start() override {}
    void test_run_end(const doctest::TestRunStats& run) override { matched = run.numTestCasesPassingFilters; }
    void test_case_start(const doctest::TestCaseData&) override {}
    void test_case_reenter(const doctest::TestCaseData&) override {}
    void test_case_end(const doctest::CurrentTestCaseStats&) override {}
    void test_case_exception(const doctest::TestCaseException&) override {}
    void subcase_start(const doctest::SubcaseSignature&) override {}
    void subcase_end() override {}
    void log_assert(const doctest::AssertData&) override {}
    void log_message(const doctest::MessageData&) override {}
    void test_case_skipped(const doctest::TestCaseData&) override {}
};

REGISTER_LISTENER("match_counter", 1, match_counter);

} // namespace

int main(int count, char** words)
{
    doctest::Context context(count, words);
    const int result = context.run();
    if (context.shouldExit()) {
        return result;
    }
    return result == 0 && matched == 0 ? 3 : result;
}
