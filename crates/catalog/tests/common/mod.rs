//! Small folders of catalogs for tests: sound rows, of which a test spoils one thing.
#![allow(dead_code)]

use catalog::{Kind, ReadOptions, Shop, read_folder};
use notice::Notice;
use std::path::Path;

/// A sound file of each kind: header and one row.
pub fn sound(kind: Kind) -> &'static str {
    match kind {
        Kind::Zeners => {
            "part,maker,cost,vz_v,tol_pct,izt_a,zzt_ohm,iz_min_a,pd_w,tj_max_c,tc_min_mv_per_c,tc_max_mv_per_c,zzk_ohm,izk_a,vz_at,status\n\
             ZA,Brindlow,0.09,5.6,2,5m,30,0.5m,0.5,175,-0.5,2.5,300,1m,warm,active\n"
        }
        Kind::Opamps => {
            "part,maker,cost,vs_min_v,vs_max_v,vcm_low_v,vcm_high_v,swing_low_v,swing_high_v,iout_a,vos_max_v,ib_max_a,iq_max_a,tj_max_c,rth_ja_c_per_w,isc_max_a\n\
             AA,Corvanth,0.35,5,36,0,1.5,0.05,1.8,20m,5m,200n,1.2m,150,100,\n"
        }
        Kind::Transistors => {
            "part,maker,cost,package,polarity,junctions,vceo_v,ic_max_a,pd_w,tj_max_c,rth_jc_c_per_w,hfe_min,vbe_max_v,vce_sat_v,soa_dc\n\
             QA,Ostmere,1.60,TO-247,npn,2,80,10,125,150,1.0,0.1:500;1:1000;10:750,2.5,1:1;5:2,10:10;25:5;80:0.5\n"
        }
        Kind::Resistors => {
            "part,maker,cost,series,values,tol_pct,tempco_ppm,power_w,vmax_v,min_ohm,max_ohm,full_power_to_c,zero_power_at_c\n\
             RA,Wexcombe,0.02,E24,,1,50,0.25,250,100,100k,70,155\n"
        }
        Kind::Pots => {
            "part,maker,cost,value_ohm,tol_pct,end_ohm,tempco_ppm,power_w\n\
             PA,Lodenby,2.40,10k,10,20,100,0.5\n"
        }
        Kind::Heatsinks => {
            "part,maker,cost,fits,rth_sa_c_per_w,cth_j_per_c\n\
             HA,Calder Vane,1.20,TO-220;TO-247,5.0,120 J/°C\n"
        }
    }
}

/// What came of reading a folder.
pub struct Outcome {
    pub shop: Option<Shop>,
    pub notices: Vec<Notice>,
}

impl Outcome {
    /// The only notice.
    #[track_caller]
    pub fn only(&self) -> &Notice {
        assert_eq!(self.notices.len(), 1, "{:#?}", self.notices);
        &self.notices[0]
    }

    /// The shop, from a folder in which nothing was found wrong.
    #[track_caller]
    pub fn clean(self) -> Shop {
        assert_eq!(self.notices, [], "nothing should be wrong");
        self.shop.expect("a shop without errors")
    }
}

/// Reads a folder of sound catalogs, with these files in place of sound ones.
pub fn read_with(files: &[(Kind, &[u8])], options: &ReadOptions) -> Outcome {
    let folder = tempfile::tempdir().unwrap();
    for kind in Kind::ALL {
        let bytes =
            files.iter().find(|(k, _)| *k == kind).map_or(sound(kind).as_bytes(), |(_, b)| b);
        std::fs::write(folder.path().join(kind.file_name()), bytes).unwrap();
    }
    read_at(folder.path(), options)
}

pub fn read_at(folder: &Path, options: &ReadOptions) -> Outcome {
    let mut notices = Vec::new();
    let shop = read_folder(folder, options, &mut notices);
    Outcome { shop, notices }
}

/// Reads sound catalogs but for one file.
pub fn read_file(kind: Kind, text: &str) -> Outcome {
    read_with(&[(kind, text.as_bytes())], &ReadOptions::default())
}

/// The sound file of a kind with one cell of its row replaced.
#[track_caller]
pub fn spoiled(kind: Kind, column: &str, cell: &str) -> String {
    let (header, row) = sound(kind).split_once('\n').unwrap();
    let place = header.split(',').position(|name| name == column).expect("a column of the file");
    let cells: Vec<&str> = row
        .trim_end()
        .split(',')
        .enumerate()
        .map(|(n, c)| if n == place { cell } else { c })
        .collect();
    format!("{header}\n{}\n", cells.join(","))
}
