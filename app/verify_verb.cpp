#include "app/verify_verb.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <chrono>
#include <filesystem>
#include <map>
#include <set>

#include "app/stop_signals.hpp"
#include "io/atomic_file.hpp"
#include "io/benchmark_folder.hpp"
#include "io/case_file.hpp"
#include "io/verify_table.hpp"
#include "solver/solve_error.hpp"
#include "study/measured.hpp"

namespace lidwright {
namespace {

namespace fs = std::filesystem;
using Clock = std::chrono::steady_clock;

/// share/lidwright/benchmarks beside the folder of an installed program, else the source tree's.
std::string own_folder() {
  std::error_code error;
  const fs::path program = fs::read_symlink("/proc/self/exe", error);
  const fs::path installed = program.parent_path().parent_path() / "share/lidwright/benchmarks";
  return fs::is_directory(installed, error) ? installed.string() : LIDWRIGHT_BENCHMARKS;
}

/// Everything that is asked for, one benchmark after the other.
class Verification {
 public:
  explicit Verification(const VerifyRequest& request)
      : request_(request), line_(request.progress), start_(Clock::now()) {}

  ExitCode operator()(const std::vector<Benchmark>& benchmarks) {
    write_csv();  // a path that cannot be written is known before the work is done
    try {
      for (const Benchmark& b : benchmarks) run(b);
    } catch (const Stopped&) {
      stopped_ = true;
    }
    line_.clear();
    const double seconds = std::chrono::duration<double>(Clock::now() - start_).count();
    const Tally t = tally(found_);
    if (stopped_) fmt::print("\nstopped; what was found until then:\n");
    fmt::print("{}", verify_close(t, seconds));
    return code(t);
  }

 private:
  void run(const Benchmark& b) {
    print(verify_head(b));
    ends_.clear();
    for (const Variant& v : b.variants) run(b, v);
  }

  void run(const Benchmark& b, const Variant& v) {
    std::vector<Comparison> rows;
    std::string failure;
    try {
      const Measured m = measured(b.how, started(v), b.grids, wanted(v), watch(b, v));
      for (const Expectation& e : v.expected) rows.push_back(compare(e, m.bars.at(e.quantity)));
      if (serves_as_start(b, v)) ends_[v.name] = m.end;
    } catch (const SolveError& e) {
      failure = e.what();
      for (const Expectation& expected : v.expected) rows.push_back(not_solved(expected));
    }
    line_.clear();
    show(b, v, rows, failure);
  }

  Problem started(const Variant& v) const {
    Problem p = v.problem;
    if (v.start.empty()) return p;
    const auto end = ends_.find(v.start);
    if (end == ends_.end())
      throw SolveError(fmt::format("the start '{}' itself was not solved", v.start));
    p.start = end->second;
    return p;
  }

  static bool serves_as_start(const Benchmark& b, const Variant& v) {
    return std::any_of(b.variants.begin(), b.variants.end(), [&](const Variant& other) {
      return !v.name.empty() && other.start == v.name;
    });
  }

  void show(const Benchmark& b, const Variant& v, std::vector<Comparison> rows,
            const std::string& failure) {
    if (!name_of(v).empty()) print(fmt::format("  {}\n", name_of(v)));
    if (!failure.empty()) print(fmt::format("  not solved: {}\n", failure));
    for (Comparison& c : rows) {
      c.benchmark = b.name;
      c.variant = v.name;
      c.settings = v.settings;
      print(verify_row(c));
      found_.push_back(c);
    }
    write_csv();
  }

  static const std::string& name_of(const Variant& v) {
    return v.name.empty() ? v.settings : v.name;
  }

  static std::vector<std::string> wanted(const Variant& v) {
    std::set<std::string> names;
    for (const Expectation& e : v.expected) names.insert(e.quantity);
    return {names.begin(), names.end()};
  }

  Watch watch(const Benchmark& b, const Variant& v) {
    Watch w;
    w.say = [this, &b, &v](const std::string& text) {
      line_.show(fmt::format("{} {}: {}", b.name, name_of(v), text));
    };
    w.stop = [] { return stop_requested(MPI_COMM_SELF); };
    return w;
  }

  void print(const std::string& text) const {
    fmt::print("{}", text);
    std::fflush(stdout);
  }

  void write_csv() const {
    if (!request_.csv.empty()) write_atomically(request_.csv, verify_csv(found_));
  }

  ExitCode code(const Tally& t) const {
    if (stopped_) return ExitCode::Interrupted;
    if (t.not_solved > 0)
      return complain(ExitCode::NotSolved, t.not_solved,
                      "not solved; the lines above them say why");
    if (t.differ + t.unresolved > 0)
      return complain(ExitCode::Disagrees, t.differ + t.unresolved,
                      "in disagreement or unresolved; docs/verify.md says how to read the table");
    return ExitCode::Done;
  }

  static ExitCode complain(ExitCode code, int values, const char* what) {
    fmt::print(stderr, "lidwright: verify: {} values are {}\n", values, what);
    return code;
  }

  const VerifyRequest& request_;
  WorkLine line_;
  Clock::time_point start_;
  std::vector<Comparison> found_;
  std::map<std::string, StoredTemperature> ends_;  ///< of the running benchmark, by variant
  bool stopped_ = false;
};

void check_names(const std::vector<std::string>& wanted, const std::vector<std::string>& known,
                 const std::string& folder) {
  for (const std::string& name : wanted)
    if (std::find(known.begin(), known.end(), name) == known.end())
      throw InputError(
          fmt::format("{}: no benchmark of this name in {}{}; `lidwright verify "
                      "--list` names them",
                      name, folder, nearest_name(name, known)));
}

void print_list(const std::string& folder, const std::vector<std::string>& names) {
  for (const std::string& name : names) {
    const BenchmarkHead head = read_benchmark_head(folder, name);
    fmt::print("{:<28} {:>4} values, {:>3} of them quick  {}\n", name, head.values,
               head.quick_values, head.title);
  }
}

/// Without --all the quick values; of a benchmark that is named and has none, all.
std::vector<Benchmark> chosen(const VerifyRequest& request, const std::string& folder,
                              const std::vector<std::string>& names) {
  std::vector<Benchmark> all;
  for (const std::string& name : names) {
    Benchmark b = read_benchmark(folder, name, request.all ? Rows::All : Rows::Quick);
    if (b.variants.empty() && !request.names.empty()) b = read_benchmark(folder, name, Rows::All);
    if (!b.variants.empty()) all.push_back(std::move(b));
  }
  return all;
}

/// Only a table of an earlier verify may be replaced.
void refuse_to_replace(const std::string& csv) {
  std::error_code unused;
  if (csv.empty() || !fs::is_regular_file(csv, unused)) return;
  const std::string mark = "# lidwright verify";
  if (read_whole_file(csv).substr(0, mark.size()) != mark)
    throw InputError(fmt::format(
        "--csv {}: the file is there and is no table of verify; give another name, or remove it",
        csv));
}

}  // namespace

std::vector<std::string> own_benchmarks() { return benchmark_names(own_folder()); }

ExitCode verify(const Session& session, const VerifyRequest& request) {
  int ranks = 1;
  MPI_Comm_size(session.comm(), &ranks);
  if (ranks > 1) throw InputError("verify: runs on one rank; start it without mpirun");
  catch_stop_signals();
  const std::string folder = request.from.empty() ? own_folder() : request.from;
  const std::vector<std::string> known = benchmark_names(folder);
  check_names(request.names, known, folder);
  const std::vector<std::string>& names = request.names.empty() ? known : request.names;
  if (request.list) {
    print_list(folder, names);
    return ExitCode::Done;
  }
  const std::vector<Benchmark> benchmarks = chosen(request, folder, names);
  if (benchmarks.empty())
    throw InputError(folder + ": none of these benchmarks is a quick one; use --all");
  refuse_to_replace(request.csv);
  return Verification(request)(benchmarks);
}

}  // namespace lidwright
