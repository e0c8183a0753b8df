(** * Clauses that contradict each other

    A proof in the format LRAT, without deletions: each step adds a clause that follows
    from earlier ones by unit propagation alone; the last one adds the empty clause. *)

From Coq Require Import Bool List PArith FMapPositive.
From Certify Require Import Statement Question Sets.
Import ListNotations.

Definition variable := positive.

(** [x~0] says that variable [x] is true, [x~1] that it is false; [1] is no literal. *)
Definition literal := positive.
Definition clause := list literal.

(** A step: a clause, and the numbers of the clauses from which it follows. *)
Definition step : Type := clause * list positive.

Implicit Types (x : variable) (l k : literal) (c : clause) (f : PositiveMap.t unit).

Fixpoint number {A : Type} (i : positive) (l : list A) : list (positive * A) :=
  match l with
  | [] => []
  | a :: rest => (i, a) :: number (Pos.succ i) rest
  end.

(** A list, to look up by place. *)
Definition by_place {A : Type} (i : positive) (l : list A) : PositiveMap.t A :=
  fold_right (fun e => PositiveMap.add (fst e) (snd e)) (PositiveMap.empty A) (number i l).

Definition database := PositiveMap.t clause.

Definition negate (l : literal) : literal :=
  match l with
  | x~0 => x~1
  | x~1 => x~0
  | 1 => 1
  end%positive.

(** [fail f c]: [f] and the literals of [c], no two of which are of one variable. *)
Fixpoint fail (f : PositiveMap.t unit) (c : clause) : option (PositiveMap.t unit) :=
  match c with
  | [] => Some f
  | l :: rest =>
      if PositiveMap.mem l f || PositiveMap.mem (negate l) f then None
      else fail (PositiveMap.add l tt f) rest
  end.

(** The only literal of [c] that is not known to fail. *)
Fixpoint unit_of (f : PositiveMap.t unit) (c : clause) : option literal :=
  match c with
  | [] => None
  | l :: rest =>
      if PositiveMap.mem l f then unit_of f rest
      else if forallb (fun k => PositiveMap.mem k f) rest then Some l else None
  end.

(** With the literals in [f] failing, each hinted clause in turn has one literal left,
    which must hold, and the last one has none. *)
Fixpoint propagate (known : database) (f : PositiveMap.t unit) (hints : list positive) : bool :=
  match hints with
  | [] => false
  | h :: rest =>
      match PositiveMap.find h known with
      | None => false
      | Some c =>
          match rest with
          | [] => forallb (fun l => PositiveMap.mem l f) c
          | _ =>
              match unit_of f c with
              | Some l => if PositiveMap.mem (negate l) f then false
                          else propagate known (PositiveMap.add (negate l) tt f) rest
              | None => false
              end
          end
      end
  end.

(** The last clause, and no other, is empty. *)
Fixpoint check_steps (known : database) (id : positive) (l : list step) : bool :=
  match l with
  | [] => false
  | (c, hints) :: rest =>
      match fail (PositiveMap.empty unit) c with
      | None => false
      | Some f =>
          if propagate known f hints then
            match c, rest with
            | [], [] => true
            | [], _ => false
            | _, _ => check_steps (PositiveMap.add id c known) (Pos.succ id) rest
            end
          else false
      end
  end.

(** The clauses given at the start have the numbers 1, 2, ..., the steps go on from there. *)
Definition check_proof (given : list clause) (todo : list step) : bool :=
  check_steps (by_place 1 given) (Pos.of_succ_nat (length given)) todo.

(** ** Why a proof shows a contradiction *)

Section Truth.

Variable truth : variable -> bool.

Definition holds (l : literal) : bool :=
  match l with
  | x~0 => truth x
  | x~1 => negb (truth x)
  | 1 => false
  end%positive.

Definition satisfied (c : clause) : Prop := exists l, In l c /\ holds l = true.

Lemma satisfied_or_not : forall c, satisfied c \/ forall l, In l c -> holds l = false.
Proof.
  intros c. destruct (existsb holds c) eqn:some.
  - left. now apply existsb_exists in some.
  - right. intros l listed. apply not_true_iff_false. intros true_l.
    apply not_true_iff_false in some. apply some, existsb_exists. now exists l.
Qed.

(** The literals of [f] all fail. *)
Definition failing (f : PositiveMap.t unit) : Prop :=
  forall l, PositiveMap.mem l f = true -> holds l = false.

Lemma failing_none : failing (PositiveMap.empty unit).
Proof. intros l. now rewrite PositiveMap.mem_find, PositiveMap.gempty. Qed.

Lemma failing_add : forall f l, failing f -> holds l = false -> failing (PositiveMap.add l tt f).
Proof. intros f l old new k listed. apply mem_add in listed as [<- | listed]; auto. Qed.

Lemma negate_fails : forall l, holds l = true -> holds (negate l) = false.
Proof. intros [x | x |]; cbn; [| now intros -> | easy]. now destruct (truth x). Qed.

Lemma fail_failing : forall c f g, fail f c = Some g ->
  failing f -> (forall l, In l c -> holds l = false) -> failing g.
Proof.
  induction c as [| l c IH]; intros f g result old all; cbn [fail] in result.
  - now injection result as <-.
  - destruct (PositiveMap.mem l f || PositiveMap.mem (negate l) f); [easy |].
    apply IH in result; [exact result | | intros; apply all; cbn; tauto].
    apply failing_add; [exact old | apply all; now left].
Qed.

Lemma unit_holds : forall c f l, unit_of f c = Some l -> failing f -> satisfied c ->
  holds l = true.
Proof.
  induction c as [| k c IH]; intros f l result old (j & listed & true_j); [easy |].
  cbn [unit_of] in result. destruct (PositiveMap.mem k f) eqn:known.
  - apply (IH f); [exact result | exact old |]. exists j. split; [| exact true_j].
    destruct listed as [<- | listed]; [| exact listed]. apply old in known. congruence.
  - destruct (forallb _ c) eqn:others; [| easy]. injection result as <-.
    destruct listed as [<- | listed]; [exact true_j |].
    rewrite forallb_forall in others. apply others, old in listed. congruence.
Qed.

Definition all_satisfied (known : database) : Prop :=
  forall id c, PositiveMap.find id known = Some c -> satisfied c.

Lemma propagate_sound : forall known hints f, all_satisfied known ->
  propagate known f hints = true -> failing f -> False.
Proof.
  intros known hints. induction hints as [| h hints IH]; intros f all accepted old; [easy |].
  cbn [propagate] in accepted. destruct (PositiveMap.find h known) as [c |] eqn:found; [| easy].
  apply all in found. destruct hints as [| h' hints].
  - destruct found as (l & listed & true_l).
    rewrite forallb_forall in accepted. apply accepted, old in listed. congruence.
  - destruct (unit_of f c) as [l |] eqn:only; [| easy].
    destruct (PositiveMap.mem (negate l) f); [easy |].
    apply IH in accepted; [easy | exact all |].
    apply failing_add; [exact old |]. now apply negate_fails, (unit_holds c f).
Qed.

(** What the first clauses say cannot all hold: each step adds a clause that holds as well,
    and the empty one does not. *)
Lemma steps_sound : forall todo known id, all_satisfied known -> check_steps known id todo = true ->
  False.
Proof.
  induction todo as [| [c hints] todo IH]; intros known id all accepted; [easy |].
  cbn [check_steps] in accepted. destruct (fail _ c) as [f |] eqn:assumed; [| easy].
  destruct (propagate known f hints) eqn:follows; [| easy].
  assert (satisfied c) as holds_c.
  { destruct (satisfied_or_not c) as [yes | no]; [exact yes | exfalso].
    apply (propagate_sound known hints f all follows).
    exact (fail_failing c _ f assumed failing_none no). }
  destruct c as [| k c]; [now destruct holds_c as (? & [] & _) |].
  apply IH in accepted; [easy |].
  intros i d. destruct (Pos.eq_dec i id) as [-> | other].
  - rewrite PositiveMap.gss. now intros [= <-].
  - rewrite PositiveMap.gso by exact other. apply all.
Qed.

Lemma by_place_in : forall (A : Type) (given : list A) i id a,
  PositiveMap.find id (by_place i given) = Some a -> In a given.
Proof.
  intros A given. unfold by_place.
  induction given as [| b given IH]; intros i id a; cbn [number fold_right fst snd].
  - now rewrite PositiveMap.gempty.
  - destruct (Pos.eq_dec id i) as [-> | other].
    + rewrite PositiveMap.gss. intros [= <-]. now left.
    + rewrite PositiveMap.gso by exact other. intros found. right. now apply IH in found.
Qed.

Theorem contradiction : forall given todo, check_proof given todo = true ->
  (forall c, In c given -> satisfied c) -> False.
Proof.
  intros given todo accepted all. apply steps_sound in accepted; [easy |].
  intros i c found. apply all. now apply by_place_in in found.
Qed.

End Truth.
