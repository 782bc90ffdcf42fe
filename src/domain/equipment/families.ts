/** Families of the equipment catalogue, as addresses name them. */
export const EQUIPMENT_FAMILIES = ['modules', 'units', 'connectors', 'inverters'] as const;
export type EquipmentFamily = (typeof EQUIPMENT_FAMILIES)[number];
