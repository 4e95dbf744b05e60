//! The outputs that the README shows are those of the program. `SEAPLUMB_REFRESH=1 cargo test --test readme` writes them anew.

use std::path::Path;

/// The lines that the README shows of what the program prints.
struct Block {
    name: &'static str,
    args: &'static [&'static str],
    keep: fn(&str) -> String,
}

const DIVE: [&str; 7] =
    ["demo-data/lander-dive.csv", "--lat", "-19.4", "--lon", "-131.7", "--pressure", "sea"];

fn blocks() -> Vec<Block> {
    vec![
        Block {
            name: "deepest",
            args: &[
                "deepest",
                DIVE[0],
                DIVE[1],
                DIVE[2],
                DIVE[3],
                DIVE[4],
                DIVE[5],
                DIVE[6],
                "--air-pressure",
                "1009.3",
            ],
            // The caution stands at the top of the page.
            keep: |out| out[..out.find("\nNot for navigation").expect("the caution")].to_string(),
        },
        Block {
            name: "reduce",
            args: &[
                "reduce",
                DIVE[0],
                DIVE[1],
                DIVE[2],
                DIVE[3],
                DIVE[4],
                DIVE[5],
                DIVE[6],
                "--air-pressure",
                "1009.3",
                "-q",
            ],
            keep: |out| {
                let lines: Vec<&str> = out.lines().collect();
                [&lines[..2], &["..."], &lines[3000..3003], &["..."], &lines[13_861..13_862]]
                    .concat()
                    .join("\n")
            },
        },
        Block {
            name: "error",
            args: &["deepest", "demo-data/shelf-cast.csv", "--lat", "-38.25"],
            keep: |out| out.to_string(),
        },
    ]
}

#[test]
fn shown_outputs_are_real() {
    let root = Path::new(env!("CARGO_MANIFEST_DIR"));
    let path = root.join("README.md");
    let mut readme = std::fs::read_to_string(&path).expect("README.md");
    let refresh = std::env::var_os("SEAPLUMB_REFRESH").is_some();
    for block in blocks() {
        let output = assert_cmd::Command::cargo_bin("seaplumb")
            .expect("the program")
            .current_dir(root)
            .args(block.args)
            .output()
            .expect("a run");
        let bytes = if output.stdout.is_empty() { output.stderr } else { output.stdout };
        let text = (block.keep)(&String::from_utf8(bytes).expect("UTF-8"));
        let begin = format!("<!-- begin:{} -->\n", block.name);
        let end = format!("<!-- end:{} -->", block.name);
        let from = readme.find(&begin).expect("the block begins") + begin.len();
        let to = readme.find(&end).expect("the block ends");
        let wanted = format!("```text\n{}\n```\n", text.trim_end());
        if refresh {
            readme.replace_range(from..to, &wanted);
        } else {
            assert_eq!(&readme[from..to], wanted, "block '{}' of README.md", block.name);
        }
    }
    if refresh {
        std::fs::write(&path, readme).expect("README.md can be written");
    }
}
