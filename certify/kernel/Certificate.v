(** * Certificates: an answer about one query, and what shows it *)

From Coq Require Import Bool.
From Certify Require Import Statement Question Normal NormalSound.
From Certify Require Witness Obstruction Counting Cases CasesSound Sweep SweepSound Clauses ClausesSound.

(** The kinds of evidence of FORMAT.md, section 6. *)
Inductive certificate :=
| ByWitness (order : list vertex)
| ByAbsence
| ByObstruction (evidence : Obstruction.obstruction)
| ByCounting (evidence : Counting.counting)
| ByCases (evidence : Cases.cases)
| BySweep (order : list vertex)
| ByClauses (evidence : Clauses.clauses).

Definition check_question (q : question) (c : certificate) : bool :=
  match c with
  | ByWitness _ | ByAbsence => false
  | ByObstruction evidence => Obstruction.check_obstruction q evidence
  | ByCounting evidence => Counting.check_counting q evidence
  | ByCases evidence => Cases.check_cases q evidence
  | BySweep order => Sweep.check_sweep q order
  | ByClauses evidence => Clauses.check_clauses q evidence
  end.

(** Whether a certificate shows that what is asked for does not exist. *)
Definition refutes (o : outcome) (c : certificate) : bool :=
  match o with
  | Unfit | OneVertex => false
  | Missing => match c with ByAbsence => true | _ => false end
  | Asks q => if well_formed q then check_question q c else false
  end.

Lemma refutes_question : forall q c, refutes (Asks q) c = true -> refuted q.
Proof.
  intros q c. simpl. destruct (well_formed q) eqn:Hfine; [|discriminate].
  destruct c as [order| |o|w|t|s|f]; cbn [check_question]; intros Hcheck; try discriminate.
  - now apply (Obstruction.check_obstruction_sound q o).
  - now apply (Counting.check_counting_sound q w).
  - now apply (CasesSound.check_cases_sound q t).
  - now apply (SweepSound.check_sweep_sound q s).
  - now apply (ClausesSound.check_clauses_sound q f).
Qed.

Section Certificate.

Context {V : Type} {named : Named V}.
Variable Q : query V.

(** [check_path Q exists c]: the certificate shows that there is such a path, or that
    there is none. *)
Definition check_path (answer : bool) (c : certificate) : bool :=
  if answer
  then match c with ByWitness order => Witness.check_path Q order | _ => false end
  else refutes (normal_path Q) c.

Definition check_cycle (answer : bool) (c : certificate) : bool :=
  if answer
  then match c with ByWitness order => Witness.check_cycle Q order | _ => false end
  else refutes (normal_cycle Q) c.

Theorem path_exists : forall c, check_path true c = true -> exists h, ham_path Q h.
Proof. intros [order| | | | | |]; try discriminate. apply Witness.check_path_sound. Qed.

Theorem cycle_exists : forall c, check_cycle true c = true -> exists h, ham_cycle Q h.
Proof. intros [order| | | | | |]; try discriminate. apply Witness.check_cycle_sound. Qed.

Theorem path_impossible : forall c,
  check_path false c = true -> ~ exists h, ham_path Q h.
Proof.
  intros c. unfold check_path. destruct (normal_path Q) as [| | |q] eqn:Hnormal.
  - discriminate.
  - intros _. now apply normal_path_missing.
  - discriminate.
  - intros Hcheck. apply (normal_path_refuted Q q Hnormal), (refutes_question q c Hcheck).
Qed.

Theorem cycle_impossible : forall c,
  check_cycle false c = true -> ~ exists h, ham_cycle Q h.
Proof.
  intros c. unfold check_cycle. destruct (normal_cycle Q) as [| | |q] eqn:Hnormal.
  - discriminate.
  - intros _. now apply normal_cycle_missing.
  - discriminate.
  - intros Hcheck. apply (normal_cycle_refuted Q q Hnormal), (refutes_question q c Hcheck).
Qed.

Theorem path_answer : forall answer c,
  check_path answer c = true -> ((exists h, ham_path Q h) <-> answer = true).
Proof.
  intros [|] c Hcheck.
  - split; [reflexivity|]. intros _. now apply path_exists with c.
  - split; [|discriminate]. intros Hsome. now apply path_impossible in Hcheck.
Qed.

Theorem cycle_answer : forall answer c,
  check_cycle answer c = true -> ((exists h, ham_cycle Q h) <-> answer = true).
Proof.
  intros [|] c Hcheck.
  - split; [reflexivity|]. intros _. now apply cycle_exists with c.
  - split; [|discriminate]. intros Hsome. now apply cycle_impossible in Hcheck.
Qed.

End Certificate.
