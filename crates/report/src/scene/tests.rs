//! The container and the description; the Khronos validator looks at real files (tests/gltf).

use serde_json::Value;

use super::*;
use crate::synthetic;

fn tetrahedron(shift: f64) -> PhaseMesh {
    let corners = [[0.0; 3], [1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]];
    PhaseMesh {
        vertices: corners.map(|[x, y, z]| [x, y + shift, z]).to_vec(),
        normals: vec![[0.0, 0.0, 1.0]; 4],
        triangles: vec![[0, 2, 1], [0, 1, 3], [0, 3, 2], [1, 2, 3]],
        volume: 1.0 / 6.0,
    }
}

fn record(name: &str, shift: f64) -> SurfaceRecord {
    SurfaceRecord {
        name: name.into(),
        display: name.into(),
        energy: -13.5,
        electrons: 2.0,
        share: 0.8,
        isovalue: 0.07,
        phases: [tetrahedron(shift), PhaseMesh::default()],
        axes: [[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]],
        bonds: vec![(0, 1)],
    }
}

fn word(file: &[u8], at: usize) -> usize {
    u32::from_le_bytes([file[at], file[at + 1], file[at + 2], file[at + 3]]) as usize
}

/// The description and the buffer, lengths checked.
fn opened(file: &[u8]) -> (Value, &[u8]) {
    assert_eq!(&file[..4], b"glTF");
    assert_eq!((word(file, 4), word(file, 8)), (2, file.len()));
    let length = word(file, 12);
    assert_eq!(&file[16..20], b"JSON");
    let json = serde_json::from_slice(&file[20..20 + length]).unwrap();
    assert_eq!(&file[24 + length..28 + length], b"BIN\0");
    let buffer = &file[28 + length..];
    assert_eq!(word(file, 20 + length), buffer.len());
    (json, buffer)
}

#[test]
fn accessors_lie_in_the_buffer_and_hold_the_vertices() {
    let document = synthetic::levels_of(&synthetic::silicon_difluoride(), 0);
    let file = surfaces_glb(&document, &[record("5a1", 0.0)]).unwrap();
    let (json, buffer) = opened(&file);
    let number = |value: &Value| value.as_u64().unwrap() as usize;
    for accessor in json["accessors"].as_array().unwrap() {
        let view = &json["bufferViews"][number(&accessor["bufferView"])];
        let (offset, length) = (number(&view["byteOffset"]), number(&view["byteLength"]));
        let size = if accessor["type"] == "VEC3" { 12 } else { 4 };
        assert_eq!(length, size * number(&accessor["count"]));
        assert!(offset % 4 == 0 && offset + length <= buffer.len());
    }
    let first = &json["meshes"][0]["primitives"][0];
    let accessor = &json["accessors"][number(&first["attributes"]["POSITION"])];
    assert_eq!(accessor["min"], serde_json::json!([0.0, 0.0, 0.0]));
    assert_eq!(accessor["max"], serde_json::json!([1.0, 1.0, 1.0]));
    assert_eq!(json["asset"]["extras"]["unit_of_positions"], "angstrom");
    let orbital = json["nodes"]
        .as_array()
        .unwrap()
        .iter()
        .find(|node| node["name"] == "5a1");
    assert_eq!(orbital.unwrap()["extras"]["isovalue"], 0.07);
}

#[test]
fn orbitals_stand_side_by_side() {
    let document = synthetic::levels_of(&synthetic::silicon_difluoride(), 0);
    let records = [record("6e:1", 0.0), record("6e:2", 3.0)];
    let file = surfaces_glb(&document, &records).unwrap();
    let (json, _) = opened(&file);
    let shift = |name: &str| {
        let nodes = json["nodes"].as_array().unwrap();
        let node = nodes.iter().find(|node| node["name"] == name).unwrap();
        node["matrix"][12].as_f64().unwrap()
    };
    let positions = positions(&document);
    let ends = records.map(|record| span(&record, &positions));
    let (first, second) = (shift("6e:1"), shift("6e:2"));
    assert!((second + ends[1].0 - (first + ends[0].1) - GAP).abs() < 1e-12);
}

#[test]
fn a_rod_reaches_from_atom_to_atom() {
    let (from, to) = ([0.2, -0.4, 1.0], [1.0, 0.3, 0.9]);
    let m = place::between(from, to, 0.05);
    let turned = |at: [f64; 3]| -> [f64; 3] {
        core::array::from_fn(|row| {
            m[row] * at[0] + m[4 + row] * at[1] + m[8 + row] * at[2] + m[12 + row]
        })
    };
    for k in 0..3 {
        assert!((turned([0.0; 3])[k] - from[k]).abs() < 1e-15);
        assert!((turned([0.0, 0.0, 1.0])[k] - to[k]).abs() < 1e-15);
    }
    let side = turned([1.0, 0.0, 0.5]);
    let middle = turned([0.0, 0.0, 0.5]);
    let off: f64 = (0..3).map(|k| (side[k] - middle[k]).powi(2)).sum();
    assert!((off.sqrt() - 0.05).abs() < 1e-15);
}
