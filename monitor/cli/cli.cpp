// SPDX-License-Identifier: GPL-3.0-or-later
// The command line's grammar. The only unit that includes CLI11: it costs seven seconds to compile.
#include <CLI/CLI.hpp>

#include <algorithm>
#include <functional>
#include <iostream>

#include "monitor/cli/commands.hpp"

namespace tw::monitor::cli {
namespace {

constexpr int kUsage = 2;

using Action = std::function<int(Streams&)>;

void addRecipeOptions(CLI::App& command, SolveOptions& options) {
  command.add_option("--recipe", options.recipe, "recipe file (baths/*.toml)")->required();
  command.add_option("--reading", options.reading, "channel=value[ unit],... ; burette inputs as channel.V=12.3")
      ->required();
  command.add_option("--constants", options.constants, "folder of the constants library");
}

void addSolve(CLI::App& app, SolveOptions& options, Action& action) {
  CLI::App* command = app.add_subcommand("solve", "Solve one liquor: free metal, margins, condition");
  addRecipeOptions(*command, options);
  command->add_flag("--json", options.json, "one JSON object, numbers in full precision");
  command->callback([&] { action = [&](Streams& streams) { return solve(options, streams); }; });
}

void addSweep(CLI::App& app, SweepOptions& options, bool& csv, Action& action) {
  CLI::App* command = app.add_subcommand("sweep", "Follow one quantity away from a liquor");
  addRecipeOptions(*command, options.solve);
  command->add_option("--over", options.over, "ph | temperature | ligand[:NAME] | metal | dilution")->required();
  command->add_option("--from", options.from, "first value")->required();
  command->add_option("--to", options.to, "last value")->required();
  command->add_option("--steps", options.steps, "number of points, both ends included")
      ->required()
      ->check(CLI::Range(2, 1000000));
  CLI::Option* json = command->add_flag("--json", options.solve.json, "an array of objects");
  command->add_flag("--csv", csv, "a table (the default)")->excludes(json);
  command->callback([&] { action = [&](Streams& streams) { return sweep(options, streams); }; });
}

void addCheck(CLI::App& app, CheckOptions& options, Action& action) {
  CLI::App* command = app.add_subcommand("check", "Check recipes, constants and shop files; list every fault");
  command->add_option("paths", options.paths, "files or folders");
  command->add_flag("--list", options.list, "show each species, solid and set that takes part");
  command->callback([&] { action = [&](Streams& streams) { return check(options, streams); }; });
}

void addConfig(CLI::App& command, std::filesystem::path& config) {
  command.add_option("--config", config, "shop file (tankward.toml)")->required();
}

void addServe(CLI::App& app, std::filesystem::path& config, const io::Clock& clock, Action& action) {
  CLI::App* command = app.add_subcommand("serve", "Run the service: watch, solve, store, warn");
  addConfig(*command, config);
  command->callback([&] { action = [&](Streams& streams) { return serve(config, clock, streams); }; });
}

void addLoad(CLI::App& app, LoadOptions& options, const io::Clock& clock, Action& action) {
  CLI::App* command = app.add_subcommand("load", "Import past readings and events; safe to repeat");
  addConfig(*command, options.config);
  command->add_option("files", options.files, "files in any form a drop folder takes")->required();
  command->callback([&] { action = [&](Streams& streams) { return load(options, clock, streams); }; });
}

void addAdopt(CLI::App& app, AdoptOptions& options, const io::Clock& clock, Action& action) {
  CLI::App* command = app.add_subcommand("adopt", "Take a changed recipe file into use for a tank");
  addConfig(*command, options.config);
  command->add_option("--tank", options.tank, "tank id")->required();
  command->add_option("--by", options.person, "who takes it into use");
  command->add_option("--reason", options.reason, "why");
  command->callback([&] { action = [&](Streams& streams) { return adopt(options, clock, streams); }; });
}

void addExport(CLI::App& app, ExportOptions& options, bool& csv, Action& action) {
  CLI::App* command = app.add_subcommand("export", "Write a tank's readings (and with --json its results)");
  addConfig(*command, options.config);
  command->add_option("--tank", options.tank, "tank id")->required();
  command->add_option("--since", options.since, "RFC 3339; default: everything");
  CLI::Option* json = command->add_flag("--json", options.json, "readings and results as JSON");
  command->add_flag("--csv", csv, "a long table (the default)")->excludes(json);
  command->callback([&] { action = [&](Streams& streams) { return exportRows(options, streams); }; });
}

void addDemo(CLI::App& app, DemoOptions& options, const io::Clock& clock, Action& action) {
  CLI::App* command = app.add_subcommand("demo", "Write an invented shop with a history");
  command->add_option("--dir", options.dir, "folder to write it in")->required();
  command->add_option("--days", options.days, "length of the history")->check(CLI::Range(1, 3660));
  command->add_option("--seed", options.seed, "same seed, end and days: the same shop");
  command->add_option("--end", options.end, "RFC 3339; default: now, cut to the hour");
  command->callback([&] { action = [&](Streams& streams) { return demo(options, clock, streams); }; });
}

}  // namespace

int run(const std::vector<std::string>& arguments, const io::Clock& clock, Streams& streams) {
  CLI::App app{"Tankward watches complexed plating baths and warns before sludge."};
  app.name("tankward");
  app.set_version_flag("--version", TW_VERSION);
  app.require_subcommand(1);
  Action action;
  SolveOptions solveOptions;
  SweepOptions sweepOptions;
  CheckOptions checkOptions;
  std::filesystem::path config;
  LoadOptions loadOptions;
  AdoptOptions adoptOptions;
  ExportOptions exportOptions;
  DemoOptions demoOptions;
  bool sweepCsv = false;
  bool exportCsv = false;
  addSolve(app, solveOptions, action);
  addSweep(app, sweepOptions, sweepCsv, action);
  addCheck(app, checkOptions, action);
  addServe(app, config, clock, action);
  addLoad(app, loadOptions, clock, action);
  addAdopt(app, adoptOptions, clock, action);
  addExport(app, exportOptions, exportCsv, action);
  addDemo(app, demoOptions, clock, action);
  try {
    std::vector<std::string> reversed(arguments.rbegin(), arguments.rend());
    app.parse(std::move(reversed));
  } catch (const CLI::ParseError& error) {
    return app.exit(error, streams.out, streams.err) == 0 ? 0 : kUsage;
  }
  return action(streams);
}

}  // namespace tw::monitor::cli
