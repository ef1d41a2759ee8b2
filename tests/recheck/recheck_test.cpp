#include "recheck/recheck.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <functional>
#include <string>
#include <vector>

#include "recheck/algebra.hpp"
#include "small_document.hpp"
#include "support/scratch.hpp"

namespace gramproof::test {
namespace {

using nlohmann::json;
using recheck::Claim;
using recheck::Outcome;

struct Outcomes {
  std::size_t upheld = 0, not_checked = 0;
  std::vector<std::string> refused;
  std::string error;
};

Outcomes outcomes_of(const Scratch& folder, const std::string& document, const std::string& data) {
  folder.file("data.csv", data);
  const auto claims = recheck::recheck(document, "v.json", {(folder.path() / "data.csv").string()});
  Outcomes outcomes;
  if (!claims) {
    outcomes.error = to_line(claims.error());
    return outcomes;
  }
  for (const Claim& claim : claims.value()) {
    if (claim.outcome == Outcome::upheld) ++outcomes.upheld;
    if (claim.outcome == Outcome::not_checked) ++outcomes.not_checked;
    if (claim.outcome == Outcome::not_upheld) outcomes.refused.push_back(claim.text);
  }
  return outcomes;
}

struct Tamper {
  std::string why;
  std::function<void(json&)> change;
  std::string refused;  ///< begins one of the claims that are not upheld
};

}  // namespace

TEST_CASE("recheck: what is true is upheld") {
  const Scratch folder;
  const Outcomes outcomes = outcomes_of(folder, small_document().dump(), small_data);
  CAPTURE(outcomes.error);
  CHECK(outcomes.refused.empty());
  CHECK(outcomes.upheld == 28);
  CHECK(outcomes.not_checked == 2);
}

TEST_CASE("recheck: each claim is refused where it is untrue") {
  const std::vector<Tamper> tampers = {
      {"a file's rows", [](json& d) { d["source"]["files"][0]["rows"] = 6; }, "data.csv has 6"},
      {"rows read", [](json& d) { d["source"]["rows_read"] = 4; }, "4 rows in all"},
      {"rows used", [](json& d) { d["source"]["rows_used"] = 5; }, "5 rows used"},
      {"rows of the design", [](json& d) { d["design"]["rows"] = 5; }, "4 rows used"},
      {"rows left out", [](json& d) { d["source"]["rows_excluded"][0]["rows"] = 2; },
       "2 rows left out for no value in p: it is 1"},
      {"rows left out, not said", [](json& d) { d["source"]["rows_excluded"] = json::array(); },
       "no row is left out for another reason: 1 row for no value in p"},
      {"a reason that is none",
       [](json& d) { d["source"]["rows_excluded"][0]["reason"] = "filter"; },
       "1 row left out for the row filter"},
      {"another file",
       [](json& d) {
         d["source"]["files"].push_back({{"name", "b"}, {"rows", 0}});
       },
       "the data are 2 files: 1 was given"},
      {"non-zero rows", [](json& d) { d["design"]["columns"][1]["nonzero_rows"] = 4; },
       "in how many rows each column is not zero: q in 3"},
      {"columns", [](json& d) { d["rank"]["columns"] = 5; }, "the design has 5 columns"},
      {"nullity", [](json& d) { d["rank"]["nullity"] = 2; }, "rank 3 and nullity 2"},
      {"no prime", [](json& d) { d["rank"]["certificate"]["prime"] = "102"; },
       "the certificate's prime 102 is a prime: it has factors"},
      {"a prime too large",
       [](json& d) { d["rank"]["certificate"]["prime"] = "18446744073709551557"; },
       "the certificate's prime 18446744073709551557 is a prime: this checker"},
      {"the residue", [](json& d) { d["rank"]["certificate"]["residue"] = "94"; },
       "their determinant is 94 modulo the prime, not 0: these 3 columns are independent: it is "
       "93"},
      {"a residue not reduced", [](json& d) { d["rank"]["certificate"]["residue"] = "194"; },
       "their determinant is 194"},
      {"a row that is not used", [](json& d) { d["rank"]["certificate"]["rows"][0] = 4; },
       "the certificate's 3 rows are among the rows used: row 4"},
      {"a row twice", [](json& d) { d["rank"]["certificate"]["rows"][0] = 2; },
       "the certificate's 3 rows are among the rows used: row 2"},
      {"a column twice, which makes the determinant zero",
       [](json& d) {
         d["rank"]["certificate"]["columns"][1] = "p";
         d["rank"]["certificate"]["residue"] = "0";
       },
       "their determinant is 0 modulo"},
      {"no certificate", [](json& d) { d["rank"].erase("certificate"); },
       "the rank is at least 3: shown to be independent are 0"},
      {"rows tested", [](json& d) { d["rank"]["certificate"]["rows_tested"] = 3; },
       "3 rows tested are all rows used"},
      {"a coefficient", [](json& d) { d["relations"][0]["terms"][1]["coefficient"] = "2"; },
       "relation 1: p + 2*q - total = 0 in all 4 rows used: it fails in 3, first in row 1"},
      {"the other sign",
       [](json& d) {
         d["relations"][0]["terms"][0]["coefficient"] = "-1";
         d["relations"][0]["terms"][1]["coefficient"] = "-1";
         d["relations"][0]["terms"][2]["coefficient"] = "1";
       },
       "relation 1: its coefficients"},
      {"not primitive",
       [](json& d) {
         d["relations"][1]["terms"][0]["coefficient"] = "4";
         d["relations"][1]["terms"][1]["coefficient"] = "-2";
       },
       "relation 2: its coefficients"},
      {"a term twice", [](json& d) { d["relations"][0]["terms"][1]["column"] = "p"; },
       "relation 1: its coefficients"},
      {"no terms", [](json& d) { d["relations"][0]["terms"] = json::array(); },
       "relation 1 has terms"},
      {"rows holding", [](json& d) { d["relations"][1]["rows_holding"] = 4; },
       "relation 2: 2*p - r = 0 in 4 rows and not in 1: it holds in 3 and not in 1"},
      {"an exception called exact", [](json& d) { d["relations"][1]["standing"] = "exact"; },
       "relation 2: 2*p - r = 0 in all 3 rows used: it fails in 1, first in row 5"},
      {"an exact one called an exception",
       [](json& d) { d["relations"][0]["standing"] = "exact_except"; },
       "relation 1: p + q - total = 0 in 4 rows and not in 0"},
      {"the residual", [](json& d) { d["relations"][1]["violations"][0]["residual"] = "1"; },
       "relation 2: the 1 violation listed, with file, line, residual and cells: row 5 leaves -1"},
      {"the line", [](json& d) { d["relations"][1]["violations"][0]["line"] = 5; },
       "relation 2: the 1 violation listed, with file, line, residual and cells: row 5 is in line "
       "6"},
      {"the row", [](json& d) { d["relations"][1]["violations"][0]["row"] = 1; },
       "relation 2: the 1 violation listed, with file, line, residual and cells: in row 1 it "
       "holds"},
      {"a row not used", [](json& d) { d["relations"][1]["violations"][0]["row"] = 4; },
       "relation 2: the 1 violation listed, with file, line, residual and cells: row 4 is not "
       "used"},
      {"the file", [](json& d) { d["relations"][1]["violations"][0]["file"] = "b.csv"; },
       "relation 2: the 1 violation listed, with file, line, residual and cells: row 5 is not in"},
      {"a cell", [](json& d) { d["relations"][1]["violations"][0]["cells"]["r"] = "70"; },
       "relation 2: the 1 violation listed, with file, line, residual and cells: the cell of r"},
      {"a violation twice",
       [](json& d) {
         d["relations"][1]["violations"].push_back(json(d["relations"][1]["violations"][0]));
       },
       "relation 2: violations are listed, and not more"},
      {"none listed", [](json& d) { d["relations"][1]["violations"] = json::array(); },
       "relation 2: violations are listed"},
      {"the largest residual", [](json& d) { d["relations"][1]["largest_residual"] = "2"; },
       "relation 2: its largest residual is 2: it is 1"},
      {"a relation dropped", [](json& d) { d["relations"].erase(0); },
       "0 exact relations listed and 0 omitted are the nullity"},
      {"kept",
       [](json& d) {
         d["kept"][0] = "total";
         d["left_out"][0] = "r";
       },
       "3 columns kept and 1 left out are the design"},
      {"a dependent set is kept",
       [](json& d) {
         d["kept"] = {"p", "q", "total"};
         d["left_out"] = {"r"};
       },
       "the columns kept are independent"},
      {"a column kept twice",
       [](json& d) {
         d["kept"] = {"p", "q", "r", "r"};
       },
       "4 columns kept and 1 left out are the design"},
      {"coefficients lost", [](json& d) { d["verdict"]["coefficients_lost"] = {"p"}; },
       "coefficients lost"},
      {"the grade", [](json& d) { d["verdict"]["grounds"]["identified"]["grade"] = "pass"; },
       "the design is singular"},
      {"the verdict", [](json& d) { d["verdict"]["overall"] = "sound"; },
       "the design is not singular"},
  };
  const Scratch folder;
  for (const Tamper& tamper : tampers) {
    CAPTURE(tamper.why);
    json document = small_document();
    tamper.change(document);
    const Outcomes outcomes = outcomes_of(folder, document.dump(), small_data);
    CAPTURE(outcomes.error);
    std::string all;
    bool found = false;
    for (const std::string& claim : outcomes.refused) {
      found = found || claim.starts_with(tamper.refused);
      all += claim + "\n";
    }
    CAPTURE(all);
    CHECK(found);
  }
}

TEST_CASE("recheck: what it does not settle is not checked, and never upheld") {
  const Scratch folder;
  json document = small_document();
  // Whether log(log(p)) is defined is not rational arithmetic, and with it which rows are used.
  document["design"]["columns"][3]["definition"] =
      json::parse(R"({"log": [{"log": [{"add": [{"cell": "r"}, {"number": "9"}]}]}]})");
  document["relations"].erase(1);
  const Outcomes outcomes = outcomes_of(folder, document.dump(), small_data);
  CHECK(outcomes.error == "");
  CHECK(outcomes.upheld == 12);  // what does not depend on which rows are used
  CHECK(outcomes.refused.empty());

  // Bounds on the rank are not upheld while what they rest on is not.
  json untrue = small_document();
  untrue["rank"]["certificate"]["residue"] = "94";
  untrue["relations"][0]["terms"][2]["coefficient"] = "-2";
  const Outcomes both = outcomes_of(folder, untrue.dump(), small_data);
  const auto refused = [&both](const std::string& claim) {
    return std::any_of(both.refused.begin(), both.refused.end(),
                       [&](const std::string& text) { return text.starts_with(claim); });
  };
  CHECK(refused("the rank is at least 3"));
  CHECK(refused("the rank is at most 3"));

  json omitted = small_document();
  omitted["rank"]["nullity"] = 1;
  omitted["relations"].erase(0);
  omitted["relations_omitted"] = 1;
  CHECK(outcomes_of(folder, omitted.dump(), small_data).refused.empty());
}

TEST_CASE("recheck: where nothing can be checked") {
  struct Case {
    std::string why;
    std::string document, data;
    std::string error;  ///< is part of the message
  };
  const std::string good = small_document().dump();
  const auto changed = [](const std::function<void(json&)>& change) {
    json document = small_document();
    change(document);
    return document.dump();
  };
  const std::string deep = std::string(60'000, '[') + std::string(60'000, ']');
  const std::vector<Case> cases = {
      {"empty", "", small_data, "v.json: this is no JSON"},
      {"cut", good.substr(0, 100), small_data, "v.json: this is no JSON"},
      {"deep", deep, small_data, "nested over 50,000 deep"},
      {"a list", "[]", small_data, "no key \"document\""},
      {"another document", changed([](json& d) { d["document"] = "other"; }), small_data,
       "this is no verdict"},
      {"a later version", changed([](json& d) { d["schema_version"] = 2; }), small_data,
       "a version of the document"},
      {"a key is absent", changed([](json& d) { d.erase("kept"); }), small_data, "no key \"kept\""},
      {"a negative count", changed([](json& d) { d["source"]["rows_read"] = -5; }), small_data,
       "\"rows_read\" is no count"},
      {"a power that would fill the memory", changed([](json& d) {
         json& definition = d["design"]["columns"][0]["definition"];
         for (int i = 0; i < 6; ++i)
           definition = {{"power", json::array({definition})}, {"exponent", 64}};
       }),
       small_data, "a power of over 10,000,000 bits"},
      {"a broken coefficient",
       changed([](json& d) { d["relations"][0]["terms"][0]["coefficient"] = "1.5"; }), small_data,
       "\"coefficient\" is no integer"},
      {"an unknown column", changed([](json& d) { d["relations"][0]["terms"][0]["column"] = "s"; }),
       small_data, "the design has no column \"s\""},
      {"a definition that is none",
       changed([](json& d) { d["design"]["columns"][0]["definition"] = json::object(); }),
       small_data, "a definition of the document cannot be read"},
      {"a column that need not be present", changed([](json& d) {
         d["source"]["must_be_present"] = {"p", "q", "r"};
       }),
       small_data, "\"must_be_present\" lacks the column \"total\""},
      {"two columns of a name", changed([](json& d) { d["design"]["columns"][0]["name"] = "q"; }),
       small_data, "two columns of the design are both called \"q\""},
      {"other data", good, "a,b\n1,2\n", "no column \"p\""},
      {"a text for a number", good, "p,q,total,r\n1,4,five,2\n",
       "data.csv:2: a cell that the verdict reads as a number is none"},
      {"a negative weight", changed([](json& d) { d["design"]["weight"] = "r"; }),
       "p,q,total,r\n1,4,5,-2\n", "the weight \"r\" is no number from 0 up"},
      {"no data", good, "", "the file has no header"},
  };
  const Scratch folder;
  for (const Case& one : cases) {
    CAPTURE(one.why);
    const Outcomes outcomes = outcomes_of(folder, one.document, one.data);
    CAPTURE(outcomes.error);
    CHECK(outcomes.error.find(one.error) != std::string::npos);
  }
}

TEST_CASE("recheck: determinants and ranks") {
  using recheck::determinant;
  CHECK(determinant({{3}}, 7) == 3);
  CHECK(determinant({{0, 1}, {1, 0}}, 7) == 6);  // -1
  CHECK(determinant({{2, 4}, {1, 2}}, 101) == 0);
  CHECK(determinant({}, 7) == 1);
  // Vandermonde on 1, 2, 3, 4: the product of the differences, 12.
  CHECK(determinant({{1, 1, 1, 1}, {1, 2, 4, 8}, {1, 3, 9, 27}, {1, 4, 16, 64}},
                    4611686018427387847U) == 12);
  CHECK(recheck::modulo(mpq_class(1, 2), 101) == 51U);
  CHECK(recheck::modulo(mpq_class(-1), 101) == 100U);
  CHECK_FALSE(recheck::modulo(mpq_class(1, 202), 101));
  CHECK(recheck::rank_of({}) == 0);
  CHECK(recheck::rank_of({{0, 0}, {0, 0}}) == 0);
  CHECK(recheck::rank_of({{0, 2}, {3, 1}}) == 2);
  CHECK(recheck::rank_of({{1, 2, 3}, {2, 4, 6}, {0, 0, 1}}) == 2);
}

}  // namespace gramproof::test
