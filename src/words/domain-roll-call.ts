/** Why not one unit of a group was heard. */
export const notStirredCouldBe = {
  gateway: ['the gateway has no supply or no connection', 'it hears another channel'],
  string: [
    'snow or deep shade on its modules',
    'its modules are not mated to their units',
    'no gateway is near enough',
  ],
  serials: ['a delivery of another kind or with other settings', 'the serials were recorded wrongly'],
};
