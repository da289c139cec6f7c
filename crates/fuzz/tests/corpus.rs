//! The kept inputs, fed as they are. An input that once broke something stays in the corpus.

use fuzz::corpus;
use fuzz::target::{ACCEPTED, Target};

#[test]
fn every_kept_input_is_read_without_harm() {
    for target in Target::ALL {
        let folder = tempfile::tempdir().expect("a folder");
        let inputs = corpus::read(&corpus::folder(), target).expect("the corpus");
        assert!(inputs.len() > 1, "{} has no corpus", target.name());
        let mut accepted = 0;
        for (name, input) in inputs {
            println!("{}/{name}", target.name());
            let behaviour = target.feed(&input, folder.path()).expect("a scratch folder");
            accepted += usize::from(behaviour.contains(ACCEPTED));
        }
        assert!(accepted > 1, "{}: a campaign has to begin with sound inputs", target.name());
    }
}
