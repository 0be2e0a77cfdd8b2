//! No bytes in any table of a result set may panic: they are read, or refused.
//! The first byte chooses the table that holds the rest; the others are sound.
#![no_main]

use libfuzzer_sys::fuzz_target;
use std::path::Path;
use truebore::results::{Reading, ResultSet, sanity};

const SOUND: [(&str, &str); 4] = [
    ("nodes.csv", "node,X,Y,ux,uy\n1,1,0,0,0\n2,2,0,0,0\n3,2,1,0,0\n4,1,1,0,0\n"),
    ("elements.csv", "element,shape,n1,n2,n3,n4\n1,quad4,1,2,3,4\n"),
    ("points.csv", "element,point,X,Y,weight,sxx,syy,szz,sxy\n1,1,1.5,0.5,1,0,0,0,0\n"),
    ("totals.csv", "quantity,value\nstrain_energy,1\n"),
];

fuzz_target!(|data: &[u8]| {
    let Some((choice, bytes)) = data.split_first() else { return };
    let folder = std::env::temp_dir().join(format!("truebore-fuzz-{}", std::process::id()));
    std::fs::create_dir_all(&folder).expect("a scratch folder");
    for (i, (name, sound)) in SOUND.iter().enumerate() {
        let content = if i == usize::from(*choice) % SOUND.len() { bytes } else { sound.as_bytes() };
        std::fs::write(folder.join(name), content).expect("a scratch file");
    }
    if let Ok(set) = ResultSet::open(Path::new(&folder), "set", &Reading::default()) {
        let _ = sanity::check_mesh(&set);
        let _ = sanity::check_points(&set);
    }
});
