// SPDX-License-Identifier: GPL-3.0-or-later
// A folder of its own for one test, and small documents to write into it.
#pragma once

#include <gtest/gtest.h>

#include <algorithm>
#include <atomic>
#include <filesystem>
#include <fstream>
#include <string>

#include "model/result.hpp"

namespace tw::io::test {

class Folder {
 public:
  Folder() {
    static std::atomic<int> count{0};
    const auto* info = testing::UnitTest::GetInstance()->current_test_info();
    std::string name =
        std::string(info->test_suite_name()) + "." + info->name() + "." + std::to_string(++count);
    std::replace(name.begin(), name.end(), '/', '_');
    m_path = std::filesystem::path(TW_BINARY_DIR) / "test-files" / name;
    std::filesystem::remove_all(m_path);
    std::filesystem::create_directories(m_path);
  }
  ~Folder() {
    std::error_code code;
    std::filesystem::remove_all(m_path, code);
  }
  Folder(const Folder&) = delete;
  Folder& operator=(const Folder&) = delete;

  [[nodiscard]] const std::filesystem::path& path() const { return m_path; }
  std::filesystem::path write(const std::string& name, const std::string& text) const {
    const auto file = m_path / name;
    std::filesystem::create_directories(file.parent_path());
    std::ofstream(file, std::ios::binary) << text;
    return file;
  }

 private:
  std::filesystem::path m_path;
};

/// The document with the first `from` replaced; the test fails when `from` is not there.
inline std::string with(std::string text, const std::string& from, const std::string& to) {
  const auto at = text.find(from);
  EXPECT_NE(at, std::string::npos) << "the sample has no " << from;
  return at == std::string::npos ? text : text.replace(at, from.size(), to);
}

/// 1-based line of the first `needle` in a text.
inline int lineOf(const std::string& text, const std::string& needle) {
  const auto at = text.find(needle);
  EXPECT_NE(at, std::string::npos) << needle;
  return 1 + static_cast<int>(std::count(text.begin(), text.begin() + static_cast<long>(at), '\n'));
}

inline std::string shown(const model::Faults& faults) {
  std::string text;
  for (const auto& fault : faults) {
    text += fault.where + ": [" + fault.code + "] " + fault.subject + ": " + fault.detail + "\n";
  }
  return text;
}

/// Invented constants of an invented metal's bath: round numbers, for reading only.
inline const char* kConstants = R"(format = "tankward-constants/1"

[[component]]
formula = "Cu^2+"
title = "Copper"
molar_mass = 63.546

[[component]]
formula = "NH3"
title = "Ammonia"
molar_mass = 17.031

[[component]]
formula = "citrate^3-"
title = "Citrate"
molar_mass = 189.10

[[component]]
formula = "CN^-"
molar_mass = 26.018

[[species]]
formula = "NH4^+"
from = { "NH3" = 1, "H^+" = 1 }
lg_K = 9.0
source = "invented"
provenance = "from memory"

[[species]]
formula = "NH4^+"
set = "salty"
from = { "NH3" = 1, "H^+" = 1 }
lg_K = 9.5
I = 1.0
medium = "Na^+|Cl^-"
source = "invented"
provenance = "from memory"

[[species]]
formula = "Cu(NH3)4^2+"
from = { "Cu^2+" = 1, "NH3" = 4 }
lg_K = 12.0
sigma = 0.1
dH_kJ_mol = -92.0
source = "invented"
provenance = "from memory"

[[species]]
formula = "CuOH^+"
from = { "Cu^2+" = 1, "H2O" = 1, "H^+" = -1 }
lg_K = -8.0
source = "invented"
provenance = "from memory"

[[species]]
formula = "Cu(citrate)^-"
from = { "Cu^2+" = 1, "citrate^3-" = 1 }
lg_K = 6.0
source = "invented"
provenance = "from memory"

[[solid]]
id = "Cu(OH)2 fresh"
gives = { "Cu^2+" = 1, "OH^-" = 2 }
lg_K = -19.0
molar_mass = 97.561
source = "invented"
provenance = "from memory"

[[solid]]
id = "CuO aged"
gives = { "Cu^2+" = 1, "OH^-" = 2, "H2O" = -1 }
lg_K = -20.0
molar_mass = 79.545
source = "invented"
provenance = "from memory"

[[gas]]
id = "NH3 gas"
of = "NH3"
lg_H = 1.8
source = "invented"
provenance = "from memory"

[[interaction]]
pair = ["NH4^+", "SO4^2-"]
epsilon = 0.1
source = "invented"

[[interaction]]
pair = ["Na^+", "ClO4^-"]
epsilon = 0.2
source = "invented"
)";

inline const char* kRecipe = R"(format = "tankward-recipe/1"

[bath]
id = "sample-bath"
title = "Sample"
metal = "Cu^2+"
ligands = ["NH3"]
activity_model = "davies"
volume_L = 900
horizon_h = 24
hazards = ["ammonia"]

[[component]]
formula = "Cu^2+"
set_by = "total"
channel = "copper"

[[component]]
formula = "NH3"
set_by = "free"
channel = "ammonia"

[[component]]
formula = "H^+"
set_by = "ph"
channel = "ph"

[[component]]
formula = "SO4^2-"
set_by = "fixed"
mol_L = 0.45

[[component]]
formula = "Na^+"
set_by = "balance"
other = "Cl^-"

[[channel]]
id = "copper"
title = "Copper metal"
unit = "g/L"
low = 18.0
target = 22.0
high = 26.0
plausible = [0.0, 80.0]
sigma_rel = 0.01
every_h = 24
guard = { act_low = 10, caution_low = 12 }

[channel.worksheet]
title = "EDTA"
value = "(V - blank) * c_EDTA * M_Cu / sample"
titrant = "c_EDTA"
inputs = [ { id = "V", title = "Burette", unit = "mL", plausible = [0, 50], repeatability = 0.03 }, { id = "blank", unit = "mL", default = 0.0 } ]
constants = { c_EDTA = { value = 0.1, unit = "mol/L" }, sample = { value = 2.0, unit = "mL" }, M_Cu = { value = 63.546, unit = "g/mol" } }
steps = ["Pipette the sample."]
caution = ["ammonia"]

[[channel]]
id = "ammonia"
unit = "g/L"
low = 70
target = 85
high = 100
plausible = [0, 250]
max_age_h = 12

[[channel]]
id = "ph"
unit = "pH"
low = 9.8
target = 10.2
high = 10.6
plausible = [7.0, 12.5]

[[channel]]
id = "temperature"
unit = "degC"
low = 30
target = 40
high = 50
plausible = [5, 95]

[[ratio]]
id = "ammonia-to-copper"
of = "ammonia"
to = "copper"
by = "mole"
low = 4.5
target = 14
high = 20

[[watch]]
solid = "Cu(OH)2 fresh"
role = "sludge"

[[watch]]
solid = "CuO aged"
role = "aged"

[limits]
ph_up = { caution = 0.6, act = 0.3 }
ligand_loss = { caution = 0.30, act = 0.15 }

[[stock]]
id = "aqua-ammonia"
supplies = { "NH3" = 13.4 }
unit = "L"
kind = ["base", "ammonium"]
max_per_step = 20
caution = ["ammonia", "ventilation"]

[[stock]]
id = "copper-sulfate"
supplies = { "Cu^2+" = 4.0, "SO4^2-" = 4.0 }
unit = "kg"
kind = ["salt"]
volume_L_per_kg = 0.2
after = ["aqua-ammonia"]
)";

}  // namespace tw::io::test
