// What people get wrong, and the one line that tells them: where, what, what to do.
#include <doctest/doctest.h>

#include "mistakes.hpp"
#include "small_tables.hpp"
#include "support/gzip.hpp"

namespace gramproof::test {
namespace {

const std::vector<Mistake> names_and_files = {
    {"missing file",
     {"check", "harbor.csv"},
     "harbor.csv: no such file (did you mean harbour.csv?)"},
    {"missing in a folder", {"check", "folder/plain.csv"}, "folder/plain.csv: no such file"},
    {"no name",
     {"check", ""},
     "the name of a data file is empty (gramproof check FILE... ; - is standard input)"},
    {"behind --", {"check", "--", "--json"}, "--json: no such file"},
    {"directory", {"check", "folder"}, "folder: this is a directory (name the files in it)"},
    {"standard input twice",
     {"check", "-", "-"},
     "standard input (-) is named twice, but can be read only once"},
    {"nothing on standard input",
     {"check", "-"},
     "standard input: the file is empty (the first line must name the columns)"},
    {"missing design file",
     {"check", "harbour.csv", "--design-file", "desing.txt"},
     "desing.txt: the design file cannot be read (check its name and its permissions)"},
    {"directory for design file",
     {"check", "harbour.csv", "--design-file", "folder"},
     "folder: this is a directory (--design-file wants a text file)"},
    {"blank design file",
     {"check", "harbour.csv", "--design-file", "blank.txt"},
     "blank.txt: the design file is empty (write terms separated by commas)"},
    {"place in a design file",
     {"check", "harbour.csv", "--design-file", "design.txt"},
     "design.txt:3:8: no column \"incme\" in harbour.csv (did you mean \"income\"?)"},
    {"wrong column",
     {"check", "harbour.csv", "--design", "constant, incme"},
     "--design:11: no column \"incme\" in harbour.csv (did you mean \"income\"?)"},
    {"case of a column",
     {"check", "harbour.csv", "--design", "constant, Age"},
     "--design:11: no column \"Age\" in harbour.csv (did you mean \"age\"?)"},
    {"column like no other",
     {"check", "harbour.csv", "--design", "constant, profit"},
     "--design:11: no column \"profit\" in harbour.csv (its columns: age, income, region, size)"},
    {"response",
     {"check", "harbour.csv", "--response", "incom"},
     "--response: no column \"incom\" in harbour.csv (did you mean \"income\"?)"},
    {"weight",
     {"check", "harbour.csv", "--weight", "siez"},
     "--weight: no column \"siez\" in harbour.csv (did you mean \"size\"?)"},
    {"complete",
     {"check", "harbour.csv", "--complete", "age, regio"},
     "--complete: no column \"regio\" in harbour.csv (did you mean \"region\"?)"},
    {"rows",
     {"check", "harbour.csv", "--rows", "age >= 18 and regoin = north"},
     "--rows:15: no column \"regoin\" in harbour.csv (did you mean \"region\"?)"},
    {"recorded",
     {"check", "harbour.csv", "--recorded", "agee=1"},
     "--recorded: no column \"agee\" in the data (did you mean \"age\"?)"},
    {"recorded text",
     {"check", "harbour.csv", "--recorded", "region=1"},
     "--recorded: \"region\" is a text column, which is not rounded (only columns of numbers have "
     "a step)"},
    {"focus",
     {"check", "harbour.csv", "--focus", "incme"},
     "--focus: no column or term of the design is called \"incme\" (did you mean \"income\"?)"},
    {"protect",
     {"check", "harbour.csv", "--protect", "incme"},
     "--protect: no column or term of the design is called \"incme\" (did you mean \"income\"?)"},
    {"focus on a control left out",
     {"check", "harbour.csv", "--design", "constant, age", "--focus", "income"},
     "--focus: no column or term of the design is called \"income\" (write it as the design or the "
     "report does)"},
    {"contrast of what is not there",
     {"check", "harbour.csv", "--design", "constant, age", "--contrast", "age", "--contrast",
      "age + income"},
     "--contrast:7: no column of the design is called \"income\" (write it as the design or the "
     "report does)"},
    {"contrast",
     {"check", "harbour.csv", "--contrast", "80*agee"},
     "--contrast:4: no column of the design is called \"agee\" (did you mean \"age\"?)"},
    {"half a contrast",
     {"check", "harbour.csv", "--contrast", "age +"},
     "--contrast:6: a column, a number or a function is expected before the end of the text"},
    {"level",
     {"check", "harbour.csv", "--design", "constant, [region = nort]"},
     "--design:21: no level \"nort\" in column \"region\" (did you mean \"north\"?)"},
    {"level like no other",
     {"check", "harbour.csv", "--design", "constant, levels(region, against = west)"},
     "--design:36: no level \"west\" in column \"region\" (its levels: north, south, east)"},
    {"text for a number",
     {"check", "harbour.csv", "--design", "constant, log(region)"},
     "--design:15: \"region\" is a text column where a number is needed (levels(region) gives a "
     "column for each level)"},
    {"unbalanced parenthesis",
     {"check", "harbour.csv", "--design", "constant, (age"},
     "--design:11: this parenthesis is not closed"},
    {"unbalanced bracket",
     {"check", "harbour.csv", "--design", "constant, [age >= 65"},
     "--design:11: this bracket is not closed"},
    {"unknown function",
     {"check", "harbour.csv", "--design", "constant, lg(income)"},
     "--design:11: no function is called `lg` (functions are log sqrt exp asinh abs min max hinge; "
     "a product is written *)"},
    {"comparison without brackets",
     {"check", "harbour.csv", "--design", "age = 3"},
     "--design:5: `,` is expected before `=` (comparisons stand in brackets, as in [age >= 65])"},
    {"not built yet",
     {"check", "harbour.csv", "--design", "constant, lag(age, 1)"},
     "--design:11: `lag` is not built yet (make the column beforehand and name it here)"},
    {"column twice",
     {"check", "harbour.csv", "--design", "age, income, age"},
     "--design:14: the column age is already made by the term at --design:1 (leave one of them "
     "out)"},
    {"too little memory",
     {"check", "harbour.csv", "--memory", "1MB", "--threads", "1", "--design",
      "constant, all_levels(income)"},
     "--design:11: with this term the design has 41 columns; the memory is enough for 14 (that "
     "many need --memory 4MB)"},
};

const std::vector<Mistake> content = {
    {"separator",
     {"check", "harbour.csv", "--separator", ";", "--design", "constant, age"},
     "harbour.csv:1: the header is not separated by semicolons, but seemingly by commas (leave "
     "--separator out, or give another one)"},
    {"separator, default design",
     {"check", "harbour.csv", "--separator", "tab"},
     "harbour.csv:1: the header is not separated by tabs, but seemingly by commas (leave "
     "--separator out, or give another one)"},
    {"empty file",
     {"check", "empty.csv"},
     "empty.csv: the file is empty (the first line must name the columns)"},
    {"header only",
     {"check", "header.csv"},
     "header.csv: there is no data row, only a header (the rows of data follow the first line, "
     "which names the columns)"},
    {"a word among numbers",
     {"check", "word.csv"},
     "word.csv:13:1: \"unknown\" is no number: column \"x\" has 1 such cell among 29 numbers (if "
     "it means missing, name it in --missing; or write levels(x) in the design)"},
    {"a word in a named column",
     {"check", "word.csv", "--design", "constant, x"},
     "--design:11: \"x\" is text: 1 cell is no number, first \"unknown\" at word.csv:13:1 "
     "(--missing names the cells that count as missing)"},
    {"ragged row",
     {"check", "ragged.csv"},
     "ragged.csv:13:6: this row has 3 cells where the header has 2 (put quotes around a cell that "
     "holds the separator; --separator sets the separator)"},
    {"same name twice",
     {"check", "twice.csv"},
     "twice.csv:1:3: columns 1 and 2 are both called \"x\" (give each column a name of its own)"},
    {"no name",
     {"check", "unnamed.csv"},
     "unnamed.csv:1:3: column 2 has no name (name it in the header, or remove the separator at the "
     "line's end)"},
    {"unterminated quote",
     {"check", "quote.csv"},
     "quote.csv:13:4: column \"y\": the quoted cell that starts here never ends: the closing quote "
     "is missing (close the quotes; a quote that belongs to the text is written twice)"},
    {"not UTF-8",
     {"check", "latin.csv"},
     "latin.csv:3:4: byte \\xf6 is not valid UTF-8 (convert the file, for instance with `iconv -f "
     "latin1 -t utf-8`)"},
    {"out of range",
     {"check", "huge.csv"},
     "huge.csv:13:4: the number \"1e400\" in column \"y\" is out of range (numbers lie between "
     "1e-305 and 1e305 in size)"},
    {"negative weight",
     {"check", "negative.csv", "--weight", "y"},
     "negative.csv:13: the weight \"y\" is -3 (weights are numbers from 0 up)"},
    {"weight of words",
     {"check", "harbour.csv", "--weight", "region"},
     "--weight: \"region\" holds cells that are no numbers, first \"north\" at harbour.csv:2:9 "
     "(--missing names the cells that count as missing)"},
    {"no row is left",
     {"check", "missing.csv"},
     "none of the 3 rows can be used: missing in \"x\": 1; missing in \"y\": 2 (a row is used only "
     "if every column of the design, the response, the weight and --complete is present in it)"},
    {"no row is kept",
     {"check", "plain.csv", "--rows", "x > 400"},
     "none of the 30 rows can be used: not kept by --rows: 30 (a row is used only if every column "
     "of the design, the response, the weight and --complete is present in it)"},
    {"log of a negative",
     {"check", "plain.csv", "--design", "constant, log(y - 3)", "--undefined", "stop"},
     "plain.csv:2: log(y - 3) is undefined in this row (--undefined exclude leaves such rows out)"},
    {"two headers",
     {"check", "plain.csv", "other.csv"},
     "other.csv:1:1: column \"z\" is not in the header of plain.csv (files of one data set have "
     "the columns of plain.csv, in any order)"},
};

}  // namespace

TEST_CASE("a wrong name, file or design is named with its place") {
  const Scratch folder;
  write_files(folder);
  check_mistakes(folder, names_and_files);
}

TEST_CASE("a fault in the data is named with its place") {
  const Scratch folder;
  write_files(folder);
  check_mistakes(folder, content);
}

TEST_CASE("a truncated .gz file") {
  const Scratch folder;
  write_files(folder);
  const std::string whole = test::gzip(harbour_table());
  const std::string half = whole.substr(0, whole.size() / 2);
  folder.file("cut.csv.gz", half);
  check_mistakes(folder,
                 {{"half of it",
                   {"check", "cut.csv.gz"},
                   "cut.csv.gz: the compressed file is truncated: it ends after " +
                       std::to_string(half.size()) +
                       " bytes, inside its data (the download or copy was probably cut off; get "
                       "the file again)"}});
}

TEST_CASE("a full set of indicators is a finding and no mistake") {
  const Scratch folder;
  write_files(folder);
  const Run run = run_program(
      folder, {"check", "harbour.csv", "--design", "constant, age, all_levels(region)"});
  CAPTURE(run);
  CHECK(run.status == 1);
  CHECK(run.output.rfind("Singular as written", 0) == 0);
  CHECK(run.errors.empty());
}

}  // namespace gramproof::test
