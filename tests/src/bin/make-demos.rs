//! Writes the demonstration projects into `demo-projects/`: `cargo run -p assize-tests --bin make-demos`.

use assize_tests::demos::{ALL, SHIPPED_SEED};
use std::{error::Error, fs, path::Path};

fn main() -> Result<(), Box<dyn Error>> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("../demo-projects");
    for make in ALL {
        let demo = make(SHIPPED_SEED).build();
        let file = demo.spec.file;
        fs::write(folder.join(format!("{file}.assize")), demo.document.to_bytes()?)?;
        fs::write(folder.join(format!("{file}.csv")), &demo.csv)?;
        if let Some(zeros) = &demo.zeros_csv {
            fs::write(folder.join(format!("{file}-zeros.csv")), zeros)?;
        }
        let title = demo.document.project().item.title();
        fs::write(
            folder.join(format!("{file}.md")),
            format!("# {title}\n\n{}\n\n{}\n", demo.spec.origin, demo.spec.story),
        )?;
    }
    Ok(())
}
