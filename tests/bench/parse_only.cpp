// The floor that audits are measured against: a process that reads one file and parses it, nothing else.
#include "document/document.hpp"

#include <fstream>
#include <sstream>

int main(int count, char** words)
{
    std::ifstream in(count > 1 ? words[1] : "");
    std::stringstream text;
    text << in.rdbuf();
    return onehand::read_document(text.str(), "t").complaints.empty() ? 0 : 1;
}
