"""zsh completes by `lidwright completions zsh`: at a terminal of its own, as when someone types."""

import os
import pty
import re
import select
import shutil
import subprocess
import sys
import time

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import completing
import runs

READY, ASKED, END = "READY>", "ASKED>", "<END"
# Instead of adding matches to the line, they are printed.
SETUP = """
PS1='{ready}'; PS2=; unsetopt zle_bracketed_paste 2>/dev/null; LISTMAX=10000; stty cols 2000 rows 200
autoload -Uz compinit; compinit -u -d '{dump}'
source '{script}'
zstyle ':completion:*' completer _complete
zstyle ':completion:*:values' verbose no
compadd() {{
  if [[ ${{@[(I)-[OAD]]}} -gt 0 ]]; then builtin compadd "$@"; return; fi
  local -a found; local rc
  builtin compadd -O found "$@"; rc=$?
  (( $#found )) && print -rl -- $found >>'{out}'
  builtin compadd "$@"
}}
ask() {{ zle complete-word; print -r -- done >>'{out}'; zle kill-whole-line }}
zle -N ask; bindkey '^I' ask
cd '{folder}'
print {ready_mark}
"""


class Zsh:
    def __init__(self, script, folder, scratch):
        self.out = scratch.path("answers")
        text = SETUP.format(
            ready=READY, dump=scratch.path("dump"), script=script, out=self.out, folder=folder, ready_mark="SET'UP'"
        )
        setup = scratch.write("setup.zsh", text)
        self.child, self.terminal = pty.fork()
        if self.child == 0:
            os.execvpe("zsh", ["zsh", "-f", "-i"], {**os.environ, "TERM": "dumb", "HOME": scratch.name})
        self.type(f"source {setup}\n")
        self.wait(lambda text: "SETUP" in text)

    def type(self, text):
        os.write(self.terminal, text.encode())

    def wait(self, done, seconds=60):
        text, deadline = "", time.monotonic() + seconds
        while not done(text):
            assert time.monotonic() < deadline, text
            if select.select([self.terminal], [], [], 0.05)[0]:
                text += os.read(self.terminal, 65536).decode(errors="replace")
        return text

    def answers(self):
        return runs.read(self.out).split("\n") if os.path.exists(self.out) else []

    def __call__(self, line):
        if os.path.exists(self.out):
            os.remove(self.out)
        self.type(line + "\t")
        self.wait(lambda _: "done" in self.answers())
        return sorted(set(self.answers()) - {"done", ""})

    def close(self):
        os.close(self.terminal)
        os.waitpid(self.child, 0)


def main():
    if not shutil.which("zsh"):
        runs.skip("zsh is not here (package zsh)")
    with runs.Scratch() as scratch:
        script = completing.script(scratch, "zsh")
        subprocess.run(["zsh", "-n", script], check=True)
        ask = Zsh(script, completing.folder(scratch), scratch)
        try:
            completing.check(ask)
        finally:
            ask.close()


main()
