/**
 * Ground-state spins J of nuclides, for the spin degeneracy 2J + 1 of an ideal ion.
 *
 * Even-even nuclei have J = 0 without exception. The others: from memory of the standard nuclear data evaluations,
 * only where the assignment is firm; the stable and long-lived ones are checked by the tests against the spins printed
 * in Rauch & Waschkowski 2003, Neutron Data Booklet. Everything else is undefined: the caller says that it is unknown.
 */

/** Labels by 2J, the index of the array. */
const byTwiceSpin: readonly string[] = [
  "Cl34 Sc42 V46 Mn50 Co54", // odd-odd with isospin 1 in the ground state
  `n H1 H3 He3 Be11 C13 C15 N13 N15 N17 O15 F19 Ne19 Mg27 Si29 P29 P31 P33 S31 Fe57 Ni63 Se77 Y89 Rh103 Ag107 Ag109
   Cd111 Cd113 Sn115 Sn117 Sn119 Te123 Te125 Xe129 Tm169 Yb171 W183 Os187 Pt195 Hg199 Tl203 Tl205 Pb207 Pu239`,
  "H2 Li6 B12 N12 N14 F18 P30 P32 Cu62 Cu64",
  `Li7 Li9 Be7 Be9 B11 B13 C9 C11 O13 Ne21 Na21 Na23 Mg23 Si31 S33 S35 Cl33 Cl35 Cl37 Ar35 Ar37 K37 K39 K41 K43 Ca39
   Ca49 Ti51 V47 Cr53 Cr55 Fe55 Fe59 Ni57 Ni59 Ni61 Cu61 Cu63 Cu65 Zn63 Ga69 Ga71 As75 Br79 Br81 Rb87 Xe131 Ba135
   Ba137 Gd155 Gd157 Tb159 Os189 Ir191 Ir193 Au197 Hg201 Pa231`,
  "Li8 B8 N16 F20 Cl36 Cl38 K42 Sc44 Co58",
  `O17 O19 F17 F21 Ne23 Na25 Mg21 Mg25 Al25 Al27 Al29 Si27 Ti47 Cr49 Mn51 Mn55 Ni65 Zn65 Zn67 Rb85 Zr91 Mo95 Mo97 Ru99
   Ru101 Pd105 Sb121 I127 Pr141 Eu151 Eu153 Dy161 Dy163 Yb173 Re185 Re187 Th229 U233
   Np237 Am243`,
  "B10 Na22 Al28 K38 Mn54 Mn56",
  `S37 Ar39 Ar41 Ca41 Ca43 Ca45 Ca47 Sc41 Sc43 Sc45 Sc47 Sc49 Ti43 Ti45 Ti49 V49 V51 Cr51 Mn53 Fe53 Co55 Co57 Co59
   Sb123 Cs133 La139 Nd143 Nd145 Pm147 Sm147 Sm149 Ho165 Er167 Lu175 Hf177 Ta181 U235`,
  "Na24 K40 Sc46 V48 Co56",
  "Ge73 Kr83 Sr87 Nb93 Tc99 In113 In115 Hf179 Bi209",
  "Al26 Co60 La138",
  "",
  "Sc48 V50 Mn52",
  "",
  "Lu176",
];

let table: ReadonlyMap<string, number> | undefined;

/** Ground-state spin J (in units of hbar) of the nuclide, or undefined where it is not in the table. */
export function groundStateSpin(label: string, chargeNumber: number, neutronNumber: number): number | undefined {
  if (chargeNumber % 2 === 0 && neutronNumber % 2 === 0) return 0;
  table ??= new Map(
    byTwiceSpin.flatMap((labels, twice) => labels.split(/\s+/).map((each): [string, number] => [each, twice / 2])),
  );
  return table.get(label);
}
