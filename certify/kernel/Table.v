(** * Tables: a family of queries, the claimed answers, and a certificate for each *)

From Coq Require Import Bool List ZArith.
From Certify Require Import Statement Rules RulesSpec Normal Certificate.
Import ListNotations.

(** ** Answers for all instances *)

(** The certificates are in the order of the instances, one for each. *)
Fixpoint check_rows {P : Type} (check : P -> certificate -> bool)
    (instances : list P) (certificates : list certificate) : bool :=
  match instances, certificates with
  | [], [] => true
  | p :: instances', c :: certificates' =>
      if check p c then check_rows check instances' certificates' else false
  | _, _ => false
  end.

Lemma check_rows_spec : forall (P : Type) (check : P -> certificate -> bool) instances certificates,
  check_rows check instances certificates = true ->
  forall p, In p instances -> exists c, check p c = true.
Proof.
  intros P check. induction instances as [|p instances IH]; intros [|c certificates];
    simpl; try discriminate; [contradiction|].
  destruct (check p c) eqn:Hcheck; [|discriminate].
  intros Hrest p' [<- | Hin]; eauto.
Qed.

Section Table.

Context {P V : Type} {named : Named V}.
Variable Q : P -> query V.
Variable claimed : P -> bool.

Definition check_path_table : list P -> list certificate -> bool :=
  check_rows (fun p => check_path (Q p) (claimed p)).

Definition check_cycle_table : list P -> list certificate -> bool :=
  check_rows (fun p => check_cycle (Q p) (claimed p)).

Theorem path_table : forall instances certificates,
  check_path_table instances certificates = true ->
  forall p, In p instances -> ((exists h, ham_path (Q p) h) <-> claimed p = true).
Proof.
  intros instances certificates Hcheck p Hin.
  destruct (check_rows_spec _ _ _ _ Hcheck p Hin) as [c Hc]. now apply path_answer with c.
Qed.

Theorem cycle_table : forall instances certificates,
  check_cycle_table instances certificates = true ->
  forall p, In p instances -> ((exists h, ham_cycle (Q p) h) <-> claimed p = true).
Proof.
  intros instances certificates Hcheck p Hin.
  destruct (check_rows_spec _ _ _ _ Hcheck p Hin) as [c Hc]. now apply cycle_answer with c.
Qed.

End Table.

(** ** A table put together from theorems about its instances *)

Lemma answer_exists : forall (A : Prop) claimed, A -> claimed = true -> (A <-> claimed = true).
Proof. tauto. Qed.

Lemma answer_impossible : forall (A : Prop) claimed,
  ~ A -> claimed = false -> (A <-> claimed = true).
Proof. intros A claimed Hnot ->. split; [contradiction | discriminate]. Qed.

(** [rows] is the table's list as the ranges make it, [listed] the same list written out. *)
Lemma every_row : forall (P : Type) (holds : P -> Prop) (rows listed : list P),
  rows = listed -> Forall holds listed -> forall p, In p rows -> holds p.
Proof. intros P holds rows listed -> Hall. now apply Forall_forall. Qed.

(** Shows that the instance at hand is one of the table's: that it is in the ranges, one
    after the other, and that [where] holds, is what the theorem assumes. *)
Ltac in_table :=
  repeat first
    [ refine (proj2 (filter_In _ _ _) (conj _ _))
    | refine (proj2 (in_extend _ _ _ _ _ _) (conj _ _))
    | refine (proj2 (in_range _ _ _) _) ];
  assumption.

(** ** Counts *)

(** [counted has l k]: of the list [l], exactly [k] have what is asked for. *)
Inductive counted {A : Type} (has : A -> Prop) : list A -> nat -> Prop :=
| counted_none : counted has [] 0
| counted_yes : forall x l k, has x -> counted has l k -> counted has (x :: l) (S k)
| counted_no : forall x l k, ~ has x -> counted has l k -> counted has (x :: l) k.

(** Here a certificate shows its answer: a witness that it exists, any other that not. *)
Definition shows (c : certificate) : bool :=
  match c with
  | ByWitness _ => true
  | _ => false
  end.

Fixpoint check_count {A : Type} (check : A -> bool -> certificate -> bool)
    (l : list A) (certificates : list certificate) : option nat :=
  match l, certificates with
  | [], [] => Some 0%nat
  | x :: l', c :: certificates' =>
      if check x (shows c) c then
        if shows c then option_map S (check_count check l' certificates')
        else check_count check l' certificates'
      else None
  | _, _ => None
  end.

Lemma check_count_spec : forall (A : Type) (has : A -> Prop) check,
  (forall x answer c, check x answer c = true -> (has x <-> answer = true)) ->
  forall l certificates k, check_count check l certificates = Some k -> counted has l k.
Proof.
  intros A has check Hcheck. induction l as [|x l IH]; intros [|c certificates] k;
    simpl; try discriminate.
  - intros Heq. injection Heq as <-. constructor.
  - destruct (check x (shows c) c) eqn:Hx; [|discriminate]. apply Hcheck in Hx.
    destruct (shows c); simpl.
    + destruct (check_count check l certificates) as [k'|] eqn:Hrest; [|discriminate].
      intros Heq. injection Heq as <-. constructor; [now apply Hx | now apply IH with certificates].
    + intros Hrest. apply counted_no; [|now apply IH with certificates].
      intros Hhas. apply Hx in Hhas. discriminate.
Qed.

Section Count.

Context {V : Type} {named : Named V}.

Theorem path_count : forall (l : list (query V)) certificates k,
  check_count check_path l certificates = Some k ->
  counted (fun Q => exists h, ham_path Q h) l k.
Proof. apply check_count_spec. apply path_answer. Qed.

Theorem cycle_count : forall (l : list (query V)) certificates k,
  check_count check_cycle l certificates = Some k ->
  counted (fun Q => exists h, ham_cycle Q h) l k.
Proof. apply check_count_spec. apply cycle_answer. Qed.

End Count.
