/** A wood maximum above this needs the caution on the bench and the master cooper's reason (PRODUCT "Cautions"). */
export const cautionAboveC = 230

/** The figure is from memory: the surface of wood can ignite from about 250 °C. */
export const hotWoodCaution =
  'Wood can ignite from about 250 °C at the surface (from memory). A limit this high needs the master cooper’s reason ' +
  'when the version is approved. Follow local code and the responsible person.'
