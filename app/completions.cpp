#include "app/completions.hpp"

namespace lidwright {

std::vector<std::string> shells() { return {"bash", "zsh", "fish"}; }

std::string completions(const ProgramEntry& program, const std::string& shell) {
  if (shell == "bash") return bash_completions(program);
  if (shell == "zsh") return zsh_completions(program);
  return fish_completions(program);
}

}  // namespace lidwright
