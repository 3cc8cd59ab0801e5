import type { Dataset, Group, File as Hdf5File } from 'h5wasm';

/** Text, one number, or several; a number is written as a 64-bit float, a typed array in its own type. */
export type NetcdfAttribute = string | number | readonly number[] | Float32Array | Int32Array;

export interface NetcdfVariable {
  readonly name: string;
  /** names of dimensions; none for a scalar */
  readonly dimensions: readonly string[];
  readonly data: Float32Array | Float64Array | Int32Array;
  readonly attributes: Readonly<Record<string, NetcdfAttribute>>;
}

export interface NetcdfFile {
  readonly dimensions: Readonly<Record<string, number>>;
  readonly variables: readonly NetcdfVariable[];
  readonly attributes: Readonly<Record<string, NetcdfAttribute>>;
}

/** Edge of a compressed chunk, values. */
const CHUNK = 256;
/** Values of a variable that is not worth compressing. */
const SMALL = 4096;
/** On wind fields level 1 takes two thirds of the time of level 4 for a file less than 1 % larger. */
const DEFLATE_LEVEL = 1;
let files = 0;

/**
 * A netCDF-4 file [RewHartnettCaron2006]: HDF5 with dimension scales. A dimension that has a variable of its own name is described
 * by it, any other by an empty scale. Large fields are compressed. The HDF5 library is loaded on first use.
 */
export async function netcdfBytes(file: NetcdfFile): Promise<Uint8Array> {
  const library = await import('h5wasm');
  await library.ready;
  const path = `galewake-${++files}.nc`;
  const clock = Date.now;
  // the library stamps the time of writing on every object: a fixed one, so that the same content gives the same bytes.
  // Nothing else runs until the clock is back
  Date.now = () => 0;
  try {
    writeHdf5(new library.File(path, 'w', { track_order: true }), file);
    return library.FS!.readFile(path) as Uint8Array;
  } finally {
    Date.now = clock;
    library.FS!.unlink(path);
  }
}

function writeHdf5(hdf5: Hdf5File, file: NetcdfFile): void {
  try {
    for (const [name, value] of Object.entries(file.attributes)) putAttribute(hdf5, { name, value });
    const coordinates = new Set(file.variables.filter((one) => one.dimensions[0] === one.name).map((one) => one.name));
    for (const [name, size] of Object.entries(file.dimensions)) {
      if (coordinates.has(name)) putVariable(hdf5, file.variables.find((one) => one.name === name)!, file.dimensions);
      else {
        const scale = hdf5.create_dataset({ name, data: new Float32Array(size), shape: [size] });
        scale.make_scale(`This is a netCDF dimension but not a netCDF variable.${String(size).padStart(10)}`);
      }
    }
    for (const variable of file.variables) {
      if (coordinates.has(variable.name)) continue;
      const dataset = putVariable(hdf5, variable, file.dimensions);
      variable.dimensions.forEach((dimension, index) => {
        dataset.attach_scale(index, dimension);
      });
    }
  } finally {
    hdf5.close();
  }
}

function putVariable(hdf5: Hdf5File, variable: NetcdfVariable, sizes: Readonly<Record<string, number>>): Dataset {
  const shape = variable.dimensions.map((dimension) => sizes[dimension]!);
  const compressed = shape.reduce((product, size) => product * size, 1) > SMALL;
  const dataset = hdf5.create_dataset({
    name: variable.name,
    data: variable.data,
    shape,
    track_order: true,
    ...(compressed && { chunks: shape.map((size) => Math.min(CHUNK, size)), compression: DEFLATE_LEVEL }),
  });
  if (variable.dimensions[0] === variable.name) dataset.make_scale(variable.name);
  for (const [name, value] of Object.entries(variable.attributes)) putAttribute(dataset, { name, value });
  return dataset;
}

function putAttribute(owner: Group | Dataset, { name, value }: { name: string; value: NetcdfAttribute }): void {
  if (typeof value === 'string') {
    // a scalar of fixed length: every reader knows it as text; HDF5 has no text of length zero
    const bytes = new TextEncoder().encode(value).length;
    owner.create_attribute(name, value, [], `S${Math.max(1, bytes)}`);
  } else if (typeof value === 'number') owner.create_attribute(name, new Float64Array([value]), [1]);
  else if (value instanceof Float32Array || value instanceof Int32Array)
    owner.create_attribute(name, value, [value.length]);
  else owner.create_attribute(name, Float64Array.from(value), [value.length]);
}
