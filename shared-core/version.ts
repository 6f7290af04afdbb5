/** Version of the core; stored with every reference, since numbers can change between versions. */
export const coreVersion = '0.1.0';
