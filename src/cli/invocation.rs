//! How the program was called, beyond what its options say.

use std::io::{IsTerminal, stdout};

/// What the parser cannot know of a call.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub struct Invocation {
    /// The call as a shell would take it; empty when there is none.
    pub call: String,
    /// Whether standard output is a terminal.
    pub to_terminal: bool,
}

impl Invocation {
    /// That of this process.
    pub fn of_this_process() -> Self {
        let arguments = std::env::args_os().skip(1).map(|a| a.to_string_lossy().into_owned());
        Self { call: call(arguments), to_terminal: stdout().is_terminal() }
    }
}

/// The program by its name, wherever it is installed, and its arguments with quotes where a shell needs them.
fn call(arguments: impl Iterator<Item = String>) -> String {
    let mut call = "seaplumb".to_string();
    for argument in arguments {
        call.push(' ');
        let is_plain = |c: char| c.is_alphanumeric() || "-_./:=,+@%".contains(c);
        if !argument.is_empty() && argument.chars().all(is_plain) {
            call.push_str(&argument);
        } else {
            call.push_str(&format!("'{}'", argument.replace('\'', "'\\''")));
        }
    }
    call
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_shell_takes_the_call_back() {
        let text = call(["reduce", "a b.csv", "--datum", "captain's", ""].map(str::to_string).into_iter());
        assert_eq!(text, r"seaplumb reduce 'a b.csv' --datum 'captain'\''s' ''");
    }
}
