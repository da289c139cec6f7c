//! Each kind of claim altered must be refused, and for the reason that it was altered in.

use crate::made::{of_sample, samples};
use certificate_check::files::prove_files;
use serde_json::{Value, json};
use std::path::Path;

const SHEET: &str = "tide-gauge-12v.toml";

fn verdict(certificate: &Value, catalogs: &Path) -> Result<Vec<String>, (String, String)> {
    let sheet = samples().join("sheets").join(SHEET);
    prove_files(certificate.to_string().as_bytes(), &sheet, catalogs)
        .map_err(|refused| (refused.claim, refused.because))
}

/// The certificate with one thing altered is refused: by this claim, in words that hold this.
fn refuses(alter: impl FnOnce(&mut Value), claim: &str, because: &str) {
    let mut certificate = of_sample(SHEET, 10);
    assert!(verdict(&certificate, &samples()).is_ok());
    alter(&mut certificate);
    let refused = verdict(&certificate, &samples()).expect_err("what was altered is refused");
    assert!(refused.0.starts_with(claim) && refused.1.contains(because), "{refused:?}");
}

#[test]
fn a_bound_that_is_raised() {
    for figure in 0..3 {
        let raise = |claim: &'static str| {
            move |c: &mut Value| {
                for step in c["claims"][claim].as_array_mut().expect("steps") {
                    step[figure] = json!(1.3 * step[figure].as_f64().expect("a figure") + 1e-3);
                }
            }
        };
        refuses(raise("least_amplifier"), "least_amplifier", "adds");
        refuses(raise("least_power"), "least_power", "adds");
    }
}

#[test]
fn a_step_of_a_bound_that_is_left_out() {
    for claim in ["least_amplifier", "least_power"] {
        refuses(|c| _ = c["claims"][claim].as_array_mut().expect("steps").pop(), claim, "adds");
    }
}

#[test]
fn a_group_that_is_dropped() {
    refuses(
        |c| _ = c["claims"]["groups"].as_array_mut().expect("groups").pop(),
        "covers",
        "no claim covers",
    );
    refuses(
        |c| _ = c["claims"]["groups"][0]["references"].as_array_mut().expect("ranges").pop(),
        "covers",
        "no claim covers",
    );
}

#[test]
fn a_pair_that_is_dropped() {
    refuses(|c| c["claims"]["pairs"] = json!([]), "covers", "no claim covers");
}

/// The first group with a check, or with `rank`.
fn group(certificate: &mut Value, is_rank: bool) -> &mut Value {
    let groups = certificate["claims"]["groups"].as_array_mut().expect("groups");
    groups.iter_mut().find(|g| (g["because"] == "rank") == is_rank).expect("there is such a group")
}

#[test]
fn a_wrong_check_that_is_named() {
    refuses(|c| group(c, false)["because"] = json!("ri-power"), "ri-power", "not beside");
    refuses(|c| group(c, false)["because"] = json!("no-such-check"), "no-such-check", "not beside");
    refuses(|c| group(c, true)["because"] = json!("output-error"), "output-error", "not beside");
}

#[test]
fn a_group_that_is_too_wide() {
    let everyone =
        |c: &mut Value| json!([0, c["claims"]["amplifier_order"].as_array().map(Vec::len)]);
    for is_rank in [false, true] {
        let widen = |c: &mut Value| {
            let all = everyone(c);
            for group in c["claims"]["groups"].as_array_mut().expect("groups") {
                if (group["because"] == "rank") == is_rank {
                    group["amplifiers"] = all.clone();
                }
            }
        };
        refuses(widen, if is_rank { "rank" } else { "" }, "not beside");
    }
    let beyond = |c: &mut Value| group(c, true)["references"] = json!([[0, 1_000_000]]);
    refuses(beyond, "rank", "");
}

#[test]
fn amplifiers_that_the_order_leaves_out() {
    let forget = |c: &mut Value| {
        let order = c["claims"]["amplifier_order"].as_array_mut().expect("places");
        let first = order[0].clone();
        order.iter_mut().for_each(|place| *place = first.clone());
    };
    refuses(forget, "", "");
}

#[test]
fn a_row_that_is_removed() {
    // The list is then shorter than was asked for, and would have to hold all that qualifies.
    refuses(|c| _ = c["rows"].as_array_mut().expect("rows").remove(4), "", "");
    // Or it is as long as was asked for, and the row is missed.
    let shorten = |c: &mut Value| {
        c["rows"].as_array_mut().expect("rows").remove(4);
        c["top"] = json!(9);
    };
    refuses(shorten, "rows", "is not listed");
}

#[test]
fn rows_that_change_places() {
    refuses(|c| c["rows"].as_array_mut().expect("rows").swap(2, 3), "row 4", "not the next");
    refuses(|c| c["rows"][3] = c["rows"][2].clone(), "row 4", "not the next");
    refuses(|c| c["top"] = json!(9), "row 10", "not the next");
}

#[test]
fn a_value_that_is_altered() {
    for value in 0..3 {
        let alter = |c: &mut Value| {
            let ohm = &mut c["rows"][1]["values_ohm"][value];
            *ohm = json!(ohm.as_f64().expect("a figure") * 1.1);
        };
        refuses(alter, "row 2", "its values should be");
    }
}

#[test]
fn a_figure_that_is_altered() {
    for figure in ["cost", "loss", "stress"] {
        let alter = |c: &mut Value| {
            let figure = &mut c["rows"][1][figure];
            *figure = json!(figure.as_f64().expect("a figure") * (1.0 + 1e-6));
        };
        refuses(alter, "row 2", "cost, stress and loss are");
    }
}

#[test]
fn parts_that_are_altered() {
    let zener = 0;
    refuses(|c| c["rows"][1]["parts"][zener] = json!(["No", "Such"]), "row 2", "may not be chosen");
    refuses(|c| c["rows"][1]["parts"][zener] = json!(null), "row 2", "it has no zener");
    let (amplifier, first) = (2, "row 1");
    refuses(|c| c["rows"][0]["parts"][amplifier] = json!(null), first, "it has no amplifier");
    refuses(|c| c["rows"][0]["parts"][6] = json!(null), first, "");
}

#[test]
fn a_hash_that_is_altered() {
    let other = json!("0".repeat(64));
    refuses(|c| c["sheet_sha256"] = other.clone(), "files", "sheet has another hash");
    refuses(
        |c| c["catalogs_sha256"]["opamps.csv"] = other.clone(),
        "files",
        "opamps.csv has another hash",
    );
    refuses(|c| c["catalogs_sha256"]["more.csv"] = other.clone(), "files", "there is no more.csv");
    let forget = |c: &mut Value| {
        _ = c["catalogs_sha256"].as_object_mut().expect("hashes").remove("shop.toml");
    };
    refuses(forget, "files", "shop.toml has another hash");
}

#[test]
fn a_catalog_that_has_changed() {
    let folder = tempfile::tempdir().expect("a folder");
    for entry in std::fs::read_dir(samples()).expect("the sample shop") {
        let path = entry.expect("the folder can be read").path();
        if path.is_file() {
            let name = path.file_name().expect("a file has a name");
            std::fs::copy(&path, folder.path().join(name)).expect("files can be copied");
        }
    }
    let certificate = of_sample(SHEET, 10);
    assert!(verdict(&certificate, folder.path()).is_ok());
    let zeners = folder.path().join("zeners.csv");
    let text = std::fs::read_to_string(&zeners).expect("zeners");
    std::fs::write(&zeners, text + "\n").expect("zeners can be written");
    let refused = verdict(&certificate, folder.path()).expect_err("another file");
    assert!(refused.1.contains("zeners.csv has another hash"), "{refused:?}");
}

#[test]
fn another_way_of_asking() {
    refuses(|c| c["set"] = json!(["load.max_a=0.1"]), "row 1", "");
    refuses(|c| c["by"] = json!("loss"), "", "");
    refuses(|c| c["by"] = json!("colour"), "format", "no criterion colour");
    refuses(|c| c["certificate"] = json!(2), "format", "not format 1");
    refuses(|c| c["more"] = json!(1), "format", "unknown field");
}

#[test]
fn a_list_that_says_that_nothing_holds() {
    let empty = |c: &mut Value| c["rows"] = json!([]);
    refuses(empty, "", "");
}
